import { describe, expect, it } from 'vitest';
import { matchedFilter, rebinFilterInput } from './matched-filter';
import { testSpectrum } from './test-spectrum';

const input = (lines: Record<string, number>, noise = 1) => {
  const spectrum = testSpectrum({ redshift: 0, lines, continuum: 0, noise, count: 2500 });
  return {
    count: spectrum.wavelength.length,
    wavelength: spectrum.wavelength,
    edges: spectrum.edges,
    residual: spectrum.flux,
    weight: spectrum.variance.map((variance) => 1 / variance),
    lsfSigma: spectrum.lsfSigma,
  };
};

describe('matchedFilter', () => {
  it('gives the flux of a line at its centre', () => {
    const data = input({ 'H-alpha 6565': 50 }, 1e-3);
    const { numerator, information } = matchedFilter(data, 80);
    const pixel = data.wavelength.findIndex((w) => w > 6564.61) - 1;
    const best = Math.max(...[pixel - 1, pixel, pixel + 1].map((i) => numerator[i] / information[i]));
    expect(best / 50).toBeCloseTo(1, 1);
  });

  it('has unit scatter on white noise', () => {
    const { numerator, information } = matchedFilter(input({}), 180);
    let sum = 0;
    for (let i = 50; i < 2450; i++) sum += numerator[i] ** 2 / information[i];
    expect(Math.sqrt(sum / 2400)).toBeGreaterThan(0.88);
    expect(Math.sqrt(sum / 2400)).toBeLessThan(1.12);
  });

  it('knows nothing where every pixel is masked', () => {
    const data = input({});
    data.weight.fill(0);
    expect(Math.max(...matchedFilter(data, 80).information)).toBe(0);
  });
});

describe('rebinFilterInput', () => {
  it('keeps the weighted mean and adds the weights', () => {
    const data = input({});
    const binned = rebinFilterInput(data, 4);
    expect(binned.count).toBe(625);
    expect(binned.weight[3]).toBeCloseTo(4, 12);
    expect(binned.residual[0]).toBeCloseTo(
      (data.residual[0] + data.residual[1] + data.residual[2] + data.residual[3]) / 4,
      12,
    );
  });
});

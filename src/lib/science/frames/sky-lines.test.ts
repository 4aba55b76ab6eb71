import { describe, expect, it } from 'vitest';
import type { Spectrum } from '$lib/domain/spectrum';
import { FWHM_PER_SIGMA, SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';
import { airToVacuum } from './air-vacuum';
import { fitPeak } from './fit-peak';
import { pixelEdges } from './pixel-edges';
import { SKY_LINES } from './sky-line-list';
import { checkSkyLines, lsfFromSkyLines } from './sky-lines';

/** A barycentric spectrum whose sky lines stand in the observatory's frame, off by `offsetKms`, at resolving power 2500. */
function withSky(offsetKms: number, observerFactor: number, brightness = 100): Spectrum {
  const n = 6000;
  const wavelength = Float64Array.from({ length: n }, (_, i) => 5200 + 0.8 * i);
  const sky = new Float64Array(n).fill(10);
  for (const line of SKY_LINES) {
    const centre = (airToVacuum(line.airAngstrom) * (1 + offsetKms / SPEED_OF_LIGHT_KMS)) / observerFactor;
    const sigma = centre / 2500 / FWHM_PER_SIGMA;
    for (let i = 0; i < n; i++) sky[i] += brightness * Math.exp(-0.5 * ((wavelength[i] - centre) / sigma) ** 2);
  }
  return {
    name: null,
    wavelength,
    edges: pixelEdges(wavelength),
    flux: new Float64Array(n),
    variance: new Float64Array(n).fill(1),
    varianceKnown: true,
    sky,
    mask: new Uint16Array(n),
    lsfSigma: wavelength.map((value) => value / 2000 / FWHM_PER_SIGMA),
    lsfSource: 'assumed',
    observerFactor,
    barycentricKms: null,
    medium: 'vacuum',
    specsys: 'BARYCENT',
    fluxUnit: null,
    fluxScaleCgs: null,
    wavelengthDoubt: false,
    warnings: [],
  };
}

describe('checkSkyLines', () => {
  it.each([0, 12.5, -30])('finds a zero point off by %d km/s', (offset) => {
    const check = checkSkyLines(withSky(offset, 1 - 8e-5))!;
    expect(check.offsetKms).toBeCloseTo(offset, 1);
    expect(check.scatterKms).toBeLessThan(0.5);
    expect(check.lines.length).toBeGreaterThan(15);
  });

  it('gives null without a sky, and where no line stands out', () => {
    expect(checkSkyLines({ ...withSky(0, 1), sky: null })).toBeNull();
    expect(checkSkyLines(withSky(0, 1, 0))).toBeNull();
  });

  it('is not misled by pixels that are not finite', () => {
    const spectrum = withSky(5, 1);
    spectrum.sky!.fill(Number.NaN, 1000, 4000);
    const check = checkSkyLines(spectrum)!;
    expect(check.offsetKms).toBeCloseTo(5, 1);
  });
});

describe('lsfFromSkyLines', () => {
  it('finds the resolving power', () => {
    const sigma = lsfFromSkyLines(withSky(0, 1))!;
    expect(7000 / (sigma[2250] * FWHM_PER_SIGMA)).toBeGreaterThan(2400);
    expect(7000 / (sigma[2250] * FWHM_PER_SIGMA)).toBeLessThan(2600);
  });

  it('gives null where there is nothing to fit', () => {
    expect(lsfFromSkyLines({ ...withSky(0, 1), sky: null })).toBeNull();
  });
});

describe('fitPeak', () => {
  const x = Array.from({ length: 21 }, (_, i) => i - 10);

  it('finds a Gaussian on a slope exactly', () => {
    const y = x.map((value) => 3 * Math.exp(-0.5 * ((value - 0.7) / 1.8) ** 2) + 2 + 0.05 * value);
    const peak = fitPeak(x, y, 2.5)!;
    expect(peak.centre).toBeCloseTo(0.7, 6);
    expect(peak.sigma).toBeCloseTo(1.8, 6);
    expect(peak.amplitude).toBeCloseTo(3, 6);
  });

  it('finds nothing in a flat run or in too few points', () => {
    expect(
      fitPeak(
        x,
        x.map(() => 1),
        2,
      ),
    ).toBeNull();
    expect(fitPeak([0, 1, 2], [0, 1, 0], 1)).toBeNull();
  });
});

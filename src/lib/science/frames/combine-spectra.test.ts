import { describe, expect, it } from 'vitest';
import { combineSpectra, partOnCentres, type CombinePart } from './combine-spectra';

/** Uniform numbers in 0..1 from a seed (Park & Miller 1988), and Gaussian ones from twelve of them. */
function generator(seed: number) {
  let state = seed;
  const uniform = () => (state = (state * 48271) % 2147483647) / 2147483647;
  return () => Array.from({ length: 12 }, uniform).reduce((sum, value) => sum + value, -6);
}

const CENTRES = 3000;
function part(start: number, step: number, fluxOf: (wavelength: number, i: number) => number, sigma = 1): CombinePart {
  const wavelength = Float64Array.from({ length: CENTRES }, (_, i) => start + i * step);
  return partOnCentres({
    wavelength,
    flux: wavelength.map(fluxOf),
    variance: new Float64Array(CENTRES).fill(sigma * sigma),
    lsfSigma: new Float64Array(CENTRES).fill(1.4),
    fluxUnit: null,
  });
}
const line = (wavelength: number) => 5 + 100 * Math.exp(-0.5 * ((wavelength - 6000) / 4) ** 2);
const sumOf = (flux: Float64Array, step: number, within: (i: number) => boolean) =>
  flux.reduce((sum, value, i) => (within(i) ? sum + value * step : sum), 0);
const scatter = (values: number[]) => Math.sqrt(values.reduce((sum, value) => sum + value * value, 0) / values.length);

describe('combineSpectra', () => {
  it('conserves the flux of a line on grids of other step and phase', () => {
    const combined = combineSpectra([part(4000, 1.5, line), part(4000.7, 1.3, line), part(3999.2, 1.42, line)]);
    const { wavelength, flux } = combined;
    const step = wavelength[1] - wavelength[0];
    const found = sumOf(flux, step, (i) => Math.abs(wavelength[i] - 6000) < 60) - 5 * 120;
    // sqrt(2 pi) x 4 x 100, to the half pixel that the range may miss of the continuum
    expect(Math.abs(found - Math.sqrt(2 * Math.PI) * 400)).toBeLessThan(5 * step);
    const centroid =
      sumOf(
        flux.map((value, i) => (value - 5) * wavelength[i]),
        step,
        (i) => Math.abs(wavelength[i] - 6000) < 30,
      ) /
      sumOf(
        flux.map((value) => value - 5),
        step,
        (i) => Math.abs(wavelength[i] - 6000) < 30,
      );
    // 0.5 km/s: the parts are sampled at pixel centres, where a detector would integrate.
    expect(Math.abs(centroid - 6000)).toBeLessThan(0.01);
  });

  it('weighs by inverse variance: var = 1 / sum(1 / v), the least-squares mean (Bevington & Robinson 2003, section 4.1, from memory)', () => {
    const combined = combineSpectra([part(4000, 1.5, () => 10, 1), part(4000, 1.5, () => 16, 2)]);
    expect(combined.flux[1000]).toBeCloseTo((10 / 1 + 16 / 4) / (1 + 1 / 4), 12);
    expect(combined.variance[1000]).toBeCloseTo(1 / (1 + 1 / 4), 12);
    expect(combined.neighbourCorrelation).toBe(0);
  });

  it('quotes variances that its own scatter bears out, and says how neighbours are correlated', () => {
    const random = generator(7);
    const noisy = () => random();
    const combined = combineSpectra([part(4000, 1.5, noisy), part(4000.4, 1.44, noisy), part(4000.9, 1.38, noisy)]);
    const inside = [...combined.flux.keys()].filter((k) => combined.parts[k] === 3);
    const pulls = inside.map((k) => combined.flux[k] / Math.sqrt(combined.variance[k]));
    expect(scatter(pulls)).toBeGreaterThan(0.95);
    expect(scatter(pulls)).toBeLessThan(1.05);
    const products = inside.slice(0, -1).map((_, i) => pulls[i] * pulls[i + 1]);
    const measured = products.reduce((sum, value) => sum + value, 0) / products.length;
    expect(combined.neighbourCorrelation).toBeGreaterThan(0.1);
    expect(Math.abs(measured - combined.neighbourCorrelation)).toBeLessThan(0.06);
  });

  it('leaves a cosmic ray out, of three and of two', () => {
    const struck = part(4000, 1.5, (_, i) => (i === 800 ? 60 : 5));
    const clean = () => part(4000, 1.5, () => 5);
    for (const parts of [
      [clean(), struck, clean()],
      [clean(), struck],
    ]) {
      const combined = combineSpectra(parts);
      expect(combined.flux[800]).toBeCloseTo(5, 12);
      expect(combined.parts[800]).toBe(parts.length - 1);
      expect(combined.clipped).toEqual(parts.map((one) => (one === struck ? 1 : 0)));
    }
  });

  it('clips nothing of a part at another flux level, and says which it is', () => {
    const combined = combineSpectra([part(4000, 1.5, () => 5), part(4000, 1.5, () => 5), part(4000, 1.5, () => 50)]);
    expect(combined.otherLevel).toEqual([2]);
    expect(combined.clipped).toEqual([0, 0, 0]);
    expect(combined.flux[100]).toBeCloseTo(20, 12);
  });

  it('keeps gaps as gaps, and joins parts that do not overlap', () => {
    const blue = part(3000, 1, () => 2);
    const red = part(6100, 1, () => 3);
    blue.variance.fill(Infinity, 100, 110);
    const { flux, variance, parts } = combineSpectra([blue, red]);
    expect(flux[105]).toBeNaN();
    expect(variance[105]).toBe(Infinity);
    expect(flux[50]).toBe(2);
    expect(flux[flux.length - 5]).toBe(3);
    expect(parts[3050]).toBe(0);
  });

  it('refuses one spectrum alone and mixed units', () => {
    const one = part(4000, 1.5, () => 1);
    expect(() => combineSpectra([one])).toThrow(RangeError);
    expect(() => combineSpectra([one, { ...one, fluxUnit: 'Jy' }])).toThrow(/units differ/);
  });
});

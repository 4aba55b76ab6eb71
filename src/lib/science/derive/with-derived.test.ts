import { describe, expect, it } from 'vitest';
import type { Measurement } from '$lib/domain/measurement';
import { drawRecipe } from '$lib/science/simulate/draw-recipe';
import { Random } from '$lib/science/simulate/random';
import { simulateSpectrum } from '$lib/science/simulate/simulate-spectrum';
import { lineFluxError } from './flux-limit';
import { withDerived } from './with-derived';

const noise = drawRecipe('pure noise', 3);
noise.arms = [{ start: 5000, end: 9000, axis: 'linear', resolvingPower: 2000, constantFwhm: true, pixelsPerFwhm: 3 }];
noise.barycentricKms = 0;
const { spectrum } = simulateSpectrum(noise, 1);

function measurement(redshift: number | null): Measurement {
  return {
    redshift,
    redshiftError: 1e-4,
    redshiftErrorMeasured: 1e-4,
    redshiftSystemic: null,
    secondRedshift: null,
    probability: 0.99,
    rivals: { nothing: 0, star: 0, passive: 0 },
    confidence: 'probable',
    fluxUnit: null,
    candidates: [],
    lines: [],
    derived: null,
    reasons: [],
    flags: [],
    noiseFactor: 1,
    frame: { medium: 'vacuum', specsys: 'BARYCENT', barycentricKms: 0 },
    engine: { version: '0', lineList: '0', settings: '0' },
  };
}

describe('lineFluxError', () => {
  it('is the scatter of a matched filter with a constant taken out', () => {
    const error = lineFluxError(spectrum, 7000, 200)!;
    const random = new Random(5);
    const sigma = Math.hypot((7000 * 200) / 2.3548 / 299792.458, 7000 / 2000 / 2.3548);
    const profile = spectrum.wavelength.map((w) => Math.exp(-0.5 * ((w - 7000) / sigma) ** 2) / sigma / 2.506628);
    const near = [...profile.keys()].filter((i) => Math.abs(spectrum.wavelength[i] - 7000) < 10 * sigma);
    const mean = near.reduce((sum, i) => sum + profile[i], 0) / near.length;
    let square = 0;
    let norm = 0;
    for (const i of near) norm += (profile[i] - mean) * profile[i];
    const trials = 3000;
    for (let t = 0; t < trials; t++) {
      let estimate = 0;
      for (const i of near) estimate += (profile[i] - mean) * random.normal(0, Math.sqrt(spectrum.variance[i]));
      square += (estimate / norm) ** 2;
    }
    expect(Math.sqrt(square / trials) / error).toBeGreaterThan(0.95);
    expect(Math.sqrt(square / trials) / error).toBeLessThan(1.05);
  });

  it('is null off the detector and on dead pixels', () => {
    expect(lineFluxError(spectrum, 12000, 200)).toBeNull();
    const dead = { ...spectrum, variance: spectrum.variance.map(() => Infinity) };
    expect(lineFluxError(dead, 7000, 200)).toBeNull();
  });
});

describe('withDerived', () => {
  it('adds limits for expected lines in range only', () => {
    const derived = withDerived(measurement(0.2), spectrum).derived!;
    expect(derived.upperLimits['H-alpha 6565']).toBeGreaterThan(0);
    expect(derived.upperLimits['Lyman-alpha 1216']).toBeUndefined();
    expect(derived.luminosityDistanceMpc).toBeGreaterThan(970);
  });

  it('scales limits by the noise factor', () => {
    const once = withDerived(measurement(0.2), spectrum).derived!.upperLimits['H-alpha 6565'];
    const twice = withDerived({ ...measurement(0.2), noiseFactor: 2 }, spectrum).derived!.upperLimits['H-alpha 6565'];
    expect(twice / once).toBeCloseTo(2, 9);
  });

  it('leaves a measurement without redshift alone', () => {
    const none = measurement(null);
    expect(withDerived(none, spectrum)).toBe(none);
  });
});

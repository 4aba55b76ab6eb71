import { describe, expect, it } from 'vitest';
import { FLEXIBLE_CONTINUUM, smoothContinuum, STIFF_CONTINUUM } from './continuum';
import { solvePenalisedSmoother } from './penalised-smoother';
import { GALAXY_LINES, testSpectrum } from './test-spectrum';
import { workingSpectrum } from './working-spectrum';

describe('smoothContinuum', () => {
  it('passes under emission lines', () => {
    const working = workingSpectrum(testSpectrum({ lines: GALAXY_LINES, continuum: 10, noise: 0.5 }));
    const continuum = smoothContinuum(working, FLEXIBLE_CONTINUUM);
    for (let i = 0; i < continuum.length; i += 50) expect(continuum[i] * working.scale).toBeCloseTo(10, 0);
  });

  it('keeps a wide bump out of the stiff continuum', () => {
    const spectrum = testSpectrum({ continuum: 10, noise: 0.1 });
    spectrum.wavelength.forEach((w, i) => (spectrum.flux[i] += 5 * Math.exp(-0.5 * ((w - 6500) / 70) ** 2)));
    const working = workingSpectrum(spectrum);
    const stiff = smoothContinuum(working, STIFF_CONTINUUM);
    expect(stiff[1250] * working.scale).toBeLessThan(11.5);
  });

  it('is zero where no pixel is usable', () => {
    const spectrum = testSpectrum({ count: 300 });
    spectrum.variance.fill(Infinity);
    expect(Math.max(...smoothContinuum(workingSpectrum(spectrum), STIFF_CONTINUUM))).toBe(0);
  });
});

describe('solvePenalisedSmoother', () => {
  it('leaves a straight line alone and bridges missing values', () => {
    const values = Float64Array.from({ length: 30 }, (_, i) => 2 + 3 * i);
    const weights = new Float64Array(30).fill(1);
    weights.fill(0, 10, 20);
    const smooth = solvePenalisedSmoother(values, weights, 1e4);
    expect(smooth[15]).toBeCloseTo(47, 4);
  });
});

import { describe, expect, it } from 'vitest';
import { measurementSchema } from '$lib/domain/measurement';
import { measureSpectrum } from './measure-spectrum';
import { GALAXY_LINES, testSpectrum } from './test-spectrum';

describe('measureSpectrum', () => {
  it('finds the redshift of a galaxy within its error and calls it secure', () => {
    const measurement = measureSpectrum(testSpectrum({ redshift: 0.2345, lines: GALAXY_LINES }));
    expect(measurementSchema.parse(measurement)).toEqual(measurement);
    expect(measurement.confidence).toBe('secure');
    expect(Math.abs(measurement.redshift! - 0.2345)).toBeLessThan(4 * measurement.redshiftError!);
    expect(measurement.redshiftError!).toBeLessThan(1e-4);
  });

  it('gives the same answer bit for bit when asked twice, whatever was measured between', () => {
    const spectrum = testSpectrum({ redshift: 0.31, lines: GALAXY_LINES, seed: 5 });
    const first = JSON.stringify(measureSpectrum(spectrum));
    measureSpectrum(testSpectrum({ redshift: 0.05, lines: GALAXY_LINES, seed: 6, count: 1500 }));
    expect(JSON.stringify(measureSpectrum(spectrum))).toBe(first);
  });

  it('does not depend on the flux unit', () => {
    const options = { redshift: 0.27, lines: GALAXY_LINES, seed: 8 };
    const plain = measureSpectrum(testSpectrum(options));
    const scaled = measureSpectrum(testSpectrum({ ...options, scale: 1e-17 }));
    expect(Math.abs(scaled.redshift! - plain.redshift!)).toBeLessThan(1e-3 * plain.redshiftError!);
    expect(scaled.lines[0].flux! / plain.lines[0].flux!).toBeCloseTo(1e-17, 20);
  });

  it('claims nothing on noise', () => {
    for (let seed = 1; seed <= 12; seed++) {
      const { confidence } = measureSpectrum(testSpectrum({ continuum: seed % 3, seed: 100 + seed, count: 1200 }));
      expect(['none', 'ambiguous']).toContain(confidence);
    }
  });

  it('says why where every pixel is masked', () => {
    const spectrum = testSpectrum({ count: 500 });
    spectrum.variance.fill(Infinity);
    const measurement = measureSpectrum(spectrum);
    expect(measurement.confidence).toBe('none');
    expect(measurement.redshift).toBeNull();
    expect(measurement.reasons[0]).toMatch(/usable pixels/);
  });

  it('never calls a single unresolved line secure', () => {
    const measurement = measureSpectrum(
      testSpectrum({ from: 6000, to: 7000, count: 700, redshift: 0, lines: { 'H-alpha 6565': 60 }, continuum: 0.3 }),
    );
    expect(measurement.confidence).not.toBe('secure');
    expect(measurement.candidates.length).toBeGreaterThan(2);
  });
});

import { describe, expect, it } from 'vitest';
import { Random } from '$lib/science/simulate/random';
import { fitCalibration, logisticRegression, type CalibrationSample } from './fit-calibration';

/** Samples whose true log odds are offset + slope x raw + third x further. */
function made(count: number, offset: number, slope: number, third: number): CalibrationSample[] {
  const random = new Random(9);
  return Array.from({ length: count }, () => {
    const raw = random.normal(0, 4);
    const further = random.normal();
    const p = 1 / (1 + Math.exp(-(offset + slope * raw + third * further)));
    return { terms: [raw, further], cameTrue: random.chance(p) };
  });
}

describe('logisticRegression', () => {
  it('finds the map that made the samples', () => {
    const [offset, slope, third] = logisticRegression(made(20000, -0.5, 0.6, 0.8));
    expect(offset).toBeCloseTo(-0.5, 1);
    expect(slope).toBeCloseTo(0.6, 1);
    expect(third).toBeCloseTo(0.8, 1);
  });

  it('stays finite where everything came true', () => {
    const sure = made(200, 0, 1, 0).map((s) => ({ ...s, cameTrue: true }));
    for (const value of logisticRegression(sure)) expect(Number.isFinite(value)).toBe(true);
  });
});

describe('fitCalibration', () => {
  it('has a small error on the folds left out, smaller than the raw odds have', () => {
    const samples = made(8000, 0, 0.4, 0);
    const fit = fitCalibration(samples);
    expect(fit.calibrationError).toBeLessThan(0.02);
    const asRaw = fitCalibration(samples.map((s) => ({ ...s, terms: [] })));
    expect(fit.logLoss).toBeLessThan(asRaw.logLoss);
  });
});

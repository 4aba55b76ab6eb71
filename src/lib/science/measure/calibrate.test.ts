import { describe, expect, it } from 'vitest';
import { calibratedProbability } from './calibrate';
import { fitCalibration } from './fit-calibration';
import { uniformNumbers } from './test-spectrum';

describe('calibratedProbability', () => {
  it('never falls as the raw posterior rises', () => {
    for (const group of ['star-forming, three lines', 'quasar, unsettled', 'never heard of']) {
      let last = 0;
      for (let raw = 0; raw <= 1.0001; raw += 0.01) {
        const probability = calibratedProbability(Math.min(1, raw), group, 12);
        expect(probability).toBeGreaterThanOrEqual(last);
        last = probability;
      }
      expect(last).toBeLessThan(1);
    }
  });
});

describe('fitCalibration', () => {
  it('finds the line that made the answers', () => {
    const uniform = uniformNumbers(4);
    const rows = Array.from({ length: 6000 }, () => {
      const x = 12 * uniform() - 6;
      const right = uniform() < 1 / (1 + Math.exp(-(0.4 + 0.7 * x)));
      return { group: 'a', raw: 1 / (1 + Math.exp(-x)), signal: 10, right };
    });
    const line = fitCalibration(rows);
    expect(line.offset).toBeCloseTo(0.4, 0);
    expect(Math.abs(line.slope - 0.7)).toBeLessThan(0.08);
  });

  it('returns the prior without rows', () => {
    expect(fitCalibration([])).toEqual({ offset: 0, slope: 0.3, signalSlope: 0.5, count: 0 });
  });
});

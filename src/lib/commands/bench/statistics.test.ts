import { describe, expect, it } from 'vitest';
import { median, robustScatter, standardDeviation, upperRate95 } from './statistics';

describe('upperRate95', () => {
  // exact Poisson limits at 95 %: 2.9957, 4.7439, 6.2958, 7.7537 (Gehrels 1986, ApJ 303, 336, table 1)
  it.each([
    [0, 2.9957],
    [1, 4.7439],
    [2, 6.2958],
    [3, 7.7537],
  ])('leaves at most the tabulated mean for %d events', (events, limit) => {
    expect(upperRate95(events, 1000) * 1000).toBeCloseTo(limit, 3);
  });

  it('needs 2,996 clean trials for 0.1 %', () => {
    expect(upperRate95(0, 2996)).toBeLessThanOrEqual(0.001);
    expect(upperRate95(0, 2990)).toBeGreaterThan(0.001);
    expect(upperRate95(0, 0)).toBeNaN();
  });
});

describe('scatter', () => {
  it('is that of the sample, and robust against one outlier', () => {
    const values = [1, 2, 3, 4, 5];
    expect(standardDeviation(values)).toBeCloseTo(Math.sqrt(2.5), 12);
    expect(median([3, 1, 2, 10])).toBe(2.5);
    expect(robustScatter([...values, 1000])).toBeLessThan(3);
  });
});

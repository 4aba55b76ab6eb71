import { describe, expect, it } from 'vitest';
import { summariseSkyCheck, type SkyCheck } from './summarise-sky-check';

const HOUR = 3_600_000;
const check = (offsetKms: number, hour: number | null = null, name = `at ${hour}`): SkyCheck => ({
  id: name,
  name,
  timeMs: hour === null ? null : hour * HOUR,
  offsetKms,
  scatterKms: 1,
});

describe('summariseSkyCheck', () => {
  it('gives nothing for no spectra, and no error for two', () => {
    expect(summariseSkyCheck([])).toBeNull();
    expect(summariseSkyCheck([check(1), check(3)])).toMatchObject({ zeroPointKms: 2, zeroPointErrorKms: null });
  });
  it('keeps its zero point where one exposure is off, and names it', () => {
    const checks = [...[1.2, 0.8, 1.4, 0.9, 1.1, 1.3, 1].map((kms, hour) => check(kms, hour)), check(14, 8, 'moved')];
    const summary = summariseSkyCheck(checks)!;
    expect(summary.zeroPointKms).toBeCloseTo(1.15, 9);
    expect(summary.scatterKms).toBeLessThan(0.5);
    expect(summary.outliers.map(({ name }) => name)).toEqual(['moved']);
  });
  it('calls nothing an outlier that lies within 5 km/s', () => {
    expect(summariseSkyCheck([0, 0, 0, 0, 4.9].map((kms) => check(kms)))!.outliers).toEqual([]);
    expect(summariseSkyCheck([0, 0, 0, 0, 5.1].map((kms) => check(kms)))!.outliers).toHaveLength(1);
  });
  it('measures a drift in km/s an hour, outliers left out', () => {
    const hours = [0, 1, 2, 3, 4, 5, 6, 7];
    const checks = hours.map((hour) => check(0.5 * hour + (hour % 2 ? 0.1 : -0.1), hour));
    const { drift } = summariseSkyCheck([...checks, check(60, 7)])!;
    expect(drift!.kmsPerHour).toBeCloseTo(0.5, 1);
    expect(drift!.errorKmsPerHour).toBeGreaterThan(0.005);
    expect(drift!.errorKmsPerHour).toBeLessThan(0.05);
  });
  it('says nothing of a drift within an hour, or without times', () => {
    const near = [0, 0.1, 0.2, 0.3, 0.4, 0.5, 0.6];
    expect(summariseSkyCheck(near.map((hour) => check(hour, hour)))!.drift).toBeNull();
    expect(summariseSkyCheck(near.map((kms) => check(kms)))!.drift).toBeNull();
  });
  it('has a standard error that matches the spread of medians of normal samples', () => {
    // by simulation: 400 medians of 101 normal values, a plain linear congruential generator
    let state = 12345;
    const uniform = () => (state = (1103515245 * state + 12345) % 2147483648) / 2147483648;
    const normal = () => Math.sqrt(-2 * Math.log(uniform() + 1e-12)) * Math.cos(2 * Math.PI * uniform());
    const runs = Array.from({ length: 400 }, () =>
      summariseSkyCheck(Array.from({ length: 101 }, () => check(normal())))!,
    );
    const mean = runs.reduce((sum, { zeroPointKms }) => sum + zeroPointKms, 0) / runs.length;
    const spread = Math.sqrt(runs.reduce((sum, { zeroPointKms }) => sum + (zeroPointKms - mean) ** 2, 0) / 399);
    const said = runs.reduce((sum, { zeroPointErrorKms }) => sum + zeroPointErrorKms!, 0) / runs.length;
    expect(spread / said).toBeGreaterThan(0.85);
    expect(spread / said).toBeLessThan(1.15);
  });
});

import { describe, expect, it } from 'vitest';
import { judgeErrors, pairRepeats, type RepeatedAnswer } from './measure-repeats';

/** Gaussian numbers from a seed: twelve uniform ones each (Park & Miller 1988). */
function generator(seed: number) {
  let state = seed;
  const uniform = () => (state = (state * 48271) % 2147483647) / 2147483647;
  return () => Array.from({ length: 12 }, uniform).reduce((sum, value) => sum + value, -6);
}

function repeats(targets: number, trueOverQuoted: number, seed: number): RepeatedAnswer[] {
  const random = generator(seed);
  return Array.from({ length: targets }, (_, i) =>
    [0, 1].map((k) => ({
      id: `${i}-${k}`,
      targetId: String(i),
      redshift: 0.5 + 1e-5 * trueOverQuoted * random(),
      redshiftError: 1e-5,
    })),
  ).flat();
}

const answer = (targetId: string, redshift: number, redshiftError = 1e-5) => ({
  id: `${targetId} ${redshift}`,
  targetId,
  redshift,
  redshiftError,
});

describe('pairRepeats', () => {
  it('pairs each spectrum with the next of its target, in km/s at that redshift', () => {
    const pairs = pairRepeats([answer('a', 1), answer('b', 2), answer('a', 1.0001, 3e-5), answer('a', 1.0002)]);
    expect(pairs).toHaveLength(2);
    // c x 0.0001 / 2 by hand
    expect(pairs[0].differenceKms).toBeCloseTo(14.9896, 4);
    expect(pairs[0].pull).toBeCloseTo(1e-4 / Math.hypot(1e-5, 3e-5), 10);
  });

  it('calls two redshifts further apart than 1,000 km/s different answers', () => {
    expect(pairRepeats([answer('a', 0.3), answer('a', 0.7)])[0].isOther).toBe(true);
  });
});

describe('judgeErrors', () => {
  it.each([1, 2.5])('finds errors that are too small by a factor of %d', (factor) => {
    const { robustWidth, robustWidthError, pairs } = judgeErrors(pairRepeats(repeats(4000, factor, 11)));
    expect(pairs).toBe(4000);
    expect(Math.abs(robustWidth! - factor)).toBeLessThan(3 * robustWidthError!);
    expect(robustWidthError!).toBeLessThan(0.02 * factor);
  });

  it('quotes an error of the width that its scatter over samples bears out', () => {
    const widths = Array.from({ length: 300 }, (_, i) => judgeErrors(pairRepeats(repeats(100, 1, i + 5))));
    const mean = widths.reduce((sum, { robustWidth }) => sum + robustWidth!, 0) / 300;
    const scatter = Math.sqrt(widths.reduce((sum, { robustWidth }) => sum + (robustWidth! - mean) ** 2, 0) / 299);
    expect(scatter / 0.11664).toBeGreaterThan(0.85);
    expect(scatter / 0.11664).toBeLessThan(1.15);
  });

  it('is not moved by a wrong line, which is counted apart', () => {
    const wrong = [answer('w', 0.3), answer('w', 0.9)];
    const figures = judgeErrors(pairRepeats([...repeats(400, 1, 3), ...wrong]));
    expect(figures.others).toBe(1);
    expect(figures.robustWidth).toBe(judgeErrors(pairRepeats(repeats(400, 1, 3))).robustWidth);
  });

  it('says nothing of fewer than three pairs', () => {
    expect(judgeErrors(pairRepeats(repeats(2, 1, 3)))).toMatchObject({ pairs: 2, robustWidth: null });
    expect(judgeErrors([])).toMatchObject({ pairs: 0, medianDifferenceKms: null });
  });
});

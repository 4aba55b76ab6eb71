// Sources: Cohen (1960, Educational and Psychological Measurement 20, 37) and Cohen (1968, Psychological Bulletin 70, 213), the example
// of 200 patients in three classes of diagnosis; Krippendorff (2011, Computing Krippendorff's Alpha-Reliability), example of four
// observers and twelve units with missing values. Data and results are from memory of these papers; that every one of the printed
// results comes out of the data is the check on that memory. Newcombe (1998, Statistics in Medicine 17, 857), table I, method 3, and
// (1998, Statistics in Medicine 17, 873), table II, method 10, are from memory too; the limits of single shares were computed again to
// six digits with astropy 5.2.1, binom_conf_interval(interval='wilson').
import { describe, expect, it } from 'vitest';
import { krippendorffAlpha } from '$lib/science/review/krippendorff-alpha';
import { entropyBits } from '$lib/server/database/queries/measurements';
import { shareDifference, wilsonInterval } from '$lib/science/review/wilson-interval';
import { countPairs, quadraticDisagreement, weightedKappa } from '$lib/science/review/weighted-kappa';

describe('weighted kappa', () => {
  const diagnoses = [
    [88, 14, 18],
    [10, 40, 10],
    [2, 6, 12],
  ];

  it('is 0.492 unweighted for the table of Cohen (1960)', () => {
    expect(weightedKappa(diagnoses, (i, j) => (i === j ? 0 : 1))).toBeCloseTo(0.492, 3);
  });

  it('is 0.348 with the weights of Cohen (1968), table 1', () => {
    const weights = [
      [0, 1, 3],
      [1, 0, 6],
      [3, 6, 0],
    ];
    expect(weightedKappa(diagnoses, (i, j) => weights[i][j])).toBeCloseTo(0.348, 3);
  });

  it('is 0.4 for the two-way table of a widely used example: 20, 5, 10, 15 (common practice, no source)', () => {
    const table = [
      [20, 5],
      [10, 15],
    ];
    expect(weightedKappa(table)).toBeCloseTo(0.4, 12);
    expect(weightedKappa(table, quadraticDisagreement)).toBeCloseTo(0.4, 12);
  });

  it('is 1 for full agreement and NaN where nobody could have disagreed', () => {
    expect(weightedKappa(countPairs(['a', 'b'], [['a', 'a'], ['b', 'b']]))).toBe(1); // prettier-ignore
    expect(weightedKappa(countPairs(['a', 'b'], [['a', 'a']]))).toBeNaN();
  });

  it('refuses a table that is not square', () => {
    expect(() => weightedKappa([[1, 2]])).toThrow(RangeError);
  });
});

describe('alpha', () => {
  const _ = null;
  const observers = [
    [1, 2, 3, 3, 2, 1, 4, 1, 2, _, _, _],
    [1, 2, 3, 3, 2, 2, 4, 1, 2, 5, _, 3],
    [_, 3, 3, 3, 2, 3, 4, 2, 2, 5, 1, _],
    [1, 2, 3, 3, 2, 4, 4, 1, 2, 5, 1, _],
  ];
  const units = observers[0].map((__, unit) => observers.map((values) => values[unit]));

  it.each([
    ['nominal', 0.743],
    ['ordinal', 0.815],
    ['interval', 0.849],
    ['ratio', 0.797],
  ] as const)('for %s data is %f as printed', (metric, expected) => {
    expect(krippendorffAlpha(units, metric)).toBeCloseTo(expected, 3);
  });

  it('is 1 for full agreement, NaN where there is nothing to compare', () => {
    expect(krippendorffAlpha([[1, 1], [2, 2, null]], 'ordinal')).toBe(1); // prettier-ignore
    expect(krippendorffAlpha([[1, null], [2]], 'nominal')).toBeNaN();
  });
});

describe('intervals of shares', () => {
  it.each([
    [81, 263, 0.2553, 0.3662, 0.255289, 0.36621],
    [15, 148, 0.0624, 0.1605, 0.062386, 0.160487],
    [0, 20, 0, 0.1611, 0, 0.161125],
    [1, 29, 0.0061, 0.1718, 0.006113, 0.171755],
  ])('are as printed for %d of %d (Newcombe 1998, table I, score without continuity correction)', (k, n, ...limits) => {
    const [low, high, lowSix, highSix] = limits;
    const interval = wilsonInterval(k, n)!;
    expect([Number(interval.low.toFixed(4)), Number(interval.high.toFixed(4))]).toEqual([low, high]);
    expect(interval.low).toBeCloseTo(lowSix, 5);
    expect(interval.high).toBeCloseTo(highSix, 5);
  });

  it('of a difference, 56 of 70 less 48 of 80, are 0.0524 to 0.3339 (Newcombe 1998, method 10)', () => {
    const { difference, low, high } = shareDifference(wilsonInterval(56, 70), wilsonInterval(48, 80))!;
    expect([difference.toFixed(4), low.toFixed(4), high.toFixed(4)]).toEqual(['0.2000', '0.0524', '0.3339']);
  });

  it('are none of nothing', () => {
    expect(wilsonInterval(0, 0)).toBeNull();
    expect(shareDifference(wilsonInterval(1, 2), null)).toBeNull();
  });
});

describe('the entropy of an answer', () => {
  const answer = (shares: number[], nothing = 0) => ({
    candidates: shares.map((probability) => ({ probability })) as never[],
    rivals: { nothing, star: 0, passive: 0 },
  });

  it('is 1.75 bits for 1/2, 1/4, 1/8, 1/8 (Cover & Thomas 2006, example 2.1.2), 0 for certainty', () => {
    expect(entropyBits(answer([0.5, 0.25, 0.125], 0.125))).toBeCloseTo(1.75, 12);
    expect(entropyBits(answer([1]))).toBe(0);
  });

  it('counts what is left of the sum as one more answer', () => {
    expect(entropyBits(answer([0.5]))).toBeCloseTo(1, 12);
  });
});

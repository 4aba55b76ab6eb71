// Sources: Cohen (1960, Educational and Psychological Measurement 20, 37) and Cohen (1968, Psychological Bulletin 70, 213), the example
// of 200 patients in three classes of diagnosis; Krippendorff (2011, Computing Krippendorff's Alpha-Reliability), example of four
// observers and twelve units with missing values. Data and results are from memory of these papers; that every one of the printed
// results comes out of the data is the check on that memory.
import { describe, expect, it } from 'vitest';
import { krippendorffAlpha } from '$lib/science/review/krippendorff-alpha';
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

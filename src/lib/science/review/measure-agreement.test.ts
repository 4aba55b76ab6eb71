import { describe, expect, it } from 'vitest';
import type { LookGiven } from './blind-looks';
import { measureAgreement, medianKnown } from './measure-agreement';

let at = 0;
const look = (spectrumId: string, userId: string, redshift: number | null, word: number): LookGiven => ({
  id: String(++at).padStart(4, '0'),
  spectrumId,
  userId,
  redshift,
  redshiftError: null,
  withdrawn: false,
  word,
  seconds: null,
  seenOthers: null,
});

describe('measureAgreement', () => {
  it('makes the table of two raters from pairs: 0.4 for 20, 5, 10, 15 (the example of the kappa itself)', () => {
    const cells = [
      [20, 0, 0],
      [5, 0, 1],
      [10, 1, 0],
      [15, 1, 1],
    ];
    const looks = cells.flatMap(([n, first, second], cell) =>
      Array.from({ length: n }, (_, i) => [
        look(`${cell} ${i}`, 'a', 0.3, first),
        look(`${cell} ${i}`, 'b', 0.3, second),
      ]).flat(),
    );
    const { pairs, spectra, kappa, withinThousand } = measureAgreement(looks, 2);
    expect({ pairs, spectra, withinThousand }).toEqual({ pairs: 50, spectra: 50, withinThousand: 1 });
    expect(kappa).toBeCloseTo(0.4, 10);
  });

  it('counts every pair of three looks, and only those with one person where asked', () => {
    const looks = [look('s', 'a', 0.3, 0), look('s', 'b', 0.3, 1), look('s', 'c', 0.7, 0), look('t', 'a', 0.1, 0)];
    expect(measureAgreement(looks, 4)).toMatchObject({ spectra: 1, pairs: 3, withinThousand: 1 / 3 });
    expect(measureAgreement(looks, 4, 'a')).toMatchObject({ spectra: 1, pairs: 2, withinThousand: 0.5 });
  });

  it('knows nothing where nothing is shared, and neither kappa nor alpha where all words are one', () => {
    expect(measureAgreement([look('s', 'a', 0.3, 0)], 4)).toEqual({
      spectra: 0,
      pairs: 0,
      withinThousand: null,
      kappa: null,
      alpha: null,
    });
    const same = [look('s', 'a', 0.3, 0), look('s', 'b', 0.3, 0)];
    expect(measureAgreement(same, 4)).toMatchObject({ withinThousand: 1, kappa: null, alpha: null });
  });
});

describe('medianKnown', () => {
  it('is the middle of what is known', () => {
    expect([medianKnown([3, null, 1, 2]), medianKnown([1, 2]), medianKnown([null])]).toEqual([2, 1.5, null]);
  });
});

import { describe, expect, it } from 'vitest';
import { errorsInWords } from './errors-in-words';

const figures = (robustWidth: number | null, others = 0) => ({
  ...{ pairs: 40, others, robustWidth, robustWidthError: robustWidth === null ? null : 0.18, medianDifferenceKms: 8 },
});

describe('errorsInWords', () => {
  it('tells honest errors from those too small and too large', () => {
    expect(errorsInWords(figures(1.2))).toMatch(/^The errors are honest as far as 40 pairs can tell/);
    expect(errorsInWords(figures(2))).toMatch(/too small by a factor of 2\.0/);
    expect(errorsInWords(figures(0.5))).toMatch(/too large by a factor of 2\.0/);
  });

  it('says when there are too few, and names pairs of different answers', () => {
    expect(errorsInWords({ ...figures(null, 1), pairs: 2 })).toBe(
      '2 pairs are too few to tell whether the errors are honest. One pair is two different answers.',
    );
  });
});

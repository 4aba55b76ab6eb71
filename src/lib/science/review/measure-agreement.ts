import type { LookGiven } from './blind-looks';
import { krippendorffAlpha } from './krippendorff-alpha';
import { shareWithinThousand } from './verdicts-agree';
import { weightedKappa } from './weighted-kappa';

/** How well looks at the same spectra agree. Every figure is null where there is nothing to make it from. */
export interface Agreement {
  /** Spectra that two people or more looked at. */
  spectra: number;
  /** Pairs of looks at one spectrum by different people. */
  pairs: number;
  /** Share of the pairs whose redshifts lie within 1,000 km/s; both without redshift counts as agreeing. */
  withinThousand: number | null;
  /** Linearly weighted kappa of the confidence words, the earlier look of each pair against the later. */
  kappa: number | null;
  /** Krippendorff's alpha, ordinal, of the confidence words over all who looked. */
  alpha: number | null;
}

const known = (value: number): number | null => (Number.isFinite(value) ? value : null);

/**
 * Agreement of blind looks, in the order of time.
 *
 * @param looks at most one a person and spectrum (`blindLooks`)
 * @param words how many confidence words there are
 * @param of counts only pairs with this person, where given; alpha is then over the same pairs
 */
export function measureAgreement(looks: readonly LookGiven[], words: number, of?: string): Agreement {
  const bySpectrum = new Map<string, LookGiven[]>();
  for (const look of looks) bySpectrum.set(look.spectrumId, [...(bySpectrum.get(look.spectrumId) ?? []), look]);
  const shared = [...bySpectrum.values()].filter(
    (group) => group.length > 1 && (of === undefined || group.some(({ userId }) => userId === of)),
  );
  const pairs = shared.flatMap((group) =>
    group.flatMap((first, i) =>
      group
        .slice(i + 1)
        .filter((second) => of === undefined || first.userId === of || second.userId === of)
        .map((second) => [first, second] as const),
    ),
  );
  const counts = Array.from({ length: words }, () => new Array<number>(words).fill(0));
  for (const [{ word: first }, { word: second }] of pairs) {
    if (first !== null && second !== null) counts[first][second]++;
  }
  const units = of === undefined ? shared : pairs;
  return {
    spectra: shared.length,
    pairs: pairs.length,
    withinThousand: known(shareWithinThousand(pairs)),
    kappa: known(weightedKappa(counts)),
    alpha: known(
      krippendorffAlpha(
        units.map((unit) => unit.map(({ word }) => word)),
        'ordinal',
      ),
    ),
  };
}

/** Median of the values that are known; null where none is. */
export function medianKnown(values: readonly (number | null)[]): number | null {
  const sorted = values.filter((value): value is number => value !== null).sort((a, b) => a - b);
  if (sorted.length === 0) return null;
  const middle = sorted.length >> 1;
  return sorted.length % 2 ? sorted[middle] : (sorted[middle - 1] + sorted[middle]) / 2;
}

import type { FittedCandidate } from './candidate-fit';
import { artefactLogOdds, type Feature } from './features';

/** Least significance of a feature that a second redshift may rest on. */
const LEAST_SIGNIFICANCE = 5;

/**
 * A second object in the same spectrum: the best other candidate whose lines explain at least two features of 5 sigma
 * or more that the first leaves unexplained, clear of sky lines.
 *
 * @returns its candidate, or null
 */
export function secondRedshiftOf(
  first: FittedCandidate,
  others: readonly FittedCandidate[],
  features: readonly Feature[],
): FittedCandidate | null {
  for (const other of others) {
    const fresh = other.explained.filter((index) => {
      const feature = features[index];
      return (
        !first.explained.includes(index) &&
        feature.significance >= LEAST_SIGNIFICANCE &&
        artefactLogOdds(feature, feature.bounded) < 0.5 * feature.bounded ** 2 - 6
      );
    });
    if (fresh.filter((index) => !features[index].nearSky).length >= 2) return other;
  }
  return null;
}

import type { FittedCandidate } from './candidate-fit';
import { artefactLogOdds, type Feature } from './features';

/** Least significance of a feature that a second redshift may rest on, and its least log evidence. */
const LEAST_SIGNIFICANCE = 5;
const LEAST_EVIDENCE = 12;

/**
 * A second object in the same spectrum: the best other candidate whose lines explain at least two features of 5 sigma
 * or more that the first leaves unexplained, clear of sky lines and of what absorption leaves of a continuum.
 *
 * @returns its candidate, or null
 */
export function secondRedshiftOf(
  first: FittedCandidate,
  others: readonly FittedCandidate[],
  features: readonly Feature[],
): FittedCandidate | null {
  for (const other of others) {
    if (other.logEvidence < LEAST_EVIDENCE) continue;
    const fresh = other.explained.filter((index) => {
      const feature = features[index];
      return (
        !first.explained.includes(index) &&
        feature.significance >= LEAST_SIGNIFICANCE &&
        !feature.rough &&
        artefactLogOdds(feature, feature.bounded) < 0.5 * feature.bounded ** 2 - 6
      );
    });
    if (fresh.filter((index) => !features[index].nearSky).length >= 2) return other;
  }
  return null;
}

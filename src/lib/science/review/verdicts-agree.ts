import { SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';

/** What agreement needs of a verdict: a redshift with its error, or none. */
export interface RedshiftVerdict {
  /** null says that the spectrum shows no redshift. */
  redshift: number | null;
  /** Standard error; null where a redshift was set by hand without a fit. */
  redshiftError: number | null;
}

/** Two redshifts closer than this agree whatever their errors say. */
const LEAST_KMS = 300;
const SIGMAS = 3;

/** Velocity between two redshifts, km/s: c |z1 - z2| / (1 + mean z). */
export function velocityBetweenKms(first: number, second: number): number {
  return (SPEED_OF_LIGHT_KMS * Math.abs(first - second)) / (1 + 0.5 * (first + second));
}

/**
 * Whether two verdicts settle a spectrum: both without redshift, or both with one and |dv| <= max(300 km/s, 3 sigma), sigma being the
 * two errors added in squares. A missing error counts as 0.
 *
 * @example
 * verdictsAgree({ redshift: 0.5, redshiftError: 1e-4 }, { redshift: 0.501, redshiftError: 1e-4 }); // true: 200 km/s
 */
export function verdictsAgree(first: RedshiftVerdict, second: RedshiftVerdict): boolean {
  if (first.redshift === null || second.redshift === null) return first.redshift === second.redshift;
  const mean = 1 + 0.5 * (first.redshift + second.redshift);
  const sigma = (SPEED_OF_LIGHT_KMS * Math.hypot(first.redshiftError ?? 0, second.redshiftError ?? 0)) / mean;
  return velocityBetweenKms(first.redshift, second.redshift) <= Math.max(LEAST_KMS, SIGMAS * sigma);
}

/**
 * Share of pairs of verdicts whose redshifts lie within 1,000 km/s; pairs where both say that there is none count as agreeing, where one
 * does as not. NaN without pairs.
 */
export function shareWithinThousand(pairs: readonly (readonly [RedshiftVerdict, RedshiftVerdict])[]): number {
  const agreeing = pairs.filter(([a, b]) =>
    a.redshift === null || b.redshift === null
      ? a.redshift === b.redshift
      : velocityBetweenKms(a.redshift, b.redshift) <= 1000,
  );
  return agreeing.length / pairs.length;
}

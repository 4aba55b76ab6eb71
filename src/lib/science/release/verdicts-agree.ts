import { SPEED_OF_LIGHT_KMS } from '../constants/physical';

/** A redshift and its standard error; `redshift` null is the verdict "no redshift". */
export interface RedshiftStatement {
  redshift: number | null;
  redshiftError: number | null;
}

/** Two redshifts closer than this are one answer, however small their errors; the velocity width of a galaxy's lines. */
const SAME_ANSWER_KMS = 300;

/** Velocity between two redshifts, km/s, as seen in the frame of either: c |ln((1 + a) / (1 + b))|. */
export function velocityBetweenKms(a: number, b: number): number {
  return SPEED_OF_LIGHT_KMS * Math.abs(Math.log((1 + a) / (1 + b)));
}

/**
 * Whether two statements on one spectrum agree: both of one kind, and where both are redshifts,
 * |dv| <= max(300 km/s, 3 sigma) with sigma the two errors in quadrature. An error that is not known counts as none.
 */
export function verdictsAgree(a: RedshiftStatement, b: RedshiftStatement): boolean {
  if (a.redshift === null || b.redshift === null) return a.redshift === b.redshift;
  const sigmaKms =
    SPEED_OF_LIGHT_KMS *
    Math.hypot((a.redshiftError ?? 0) / (1 + a.redshift), (b.redshiftError ?? 0) / (1 + b.redshift));
  return velocityBetweenKms(a.redshift, b.redshift) <= Math.max(SAME_ANSWER_KMS, 3 * sigmaKms);
}

import type { ReleaseRow } from '$lib/domain/release';
import type { ReleaseSummary } from '$lib/domain/release-summary';
import { SPEED_OF_LIGHT_KMS } from '../constants/physical';

function median(values: number[]): number | null {
  if (values.length === 0) return null;
  const sorted = [...values].sort((a, b) => a - b);
  const middle = sorted.length >> 1;
  return sorted.length % 2 ? sorted[middle] : (sorted[middle - 1] + sorted[middle]) / 2;
}

/**
 * Counts and figures of a release, for its page. Velocity errors are c sigma_z / (1 + z), km/s; rows without an error
 * are left out of their median. Without rows range and median are null.
 */
export function summariseRows(rows: readonly ReleaseRow[]): ReleaseSummary {
  const confidence = { secure: 0, probable: 0, ambiguous: 0 };
  const decidedBy = { people: 0, engine: 0 };
  const velocityErrors: number[] = [];
  let [low, high] = [Infinity, -Infinity];
  for (const row of rows) {
    confidence[row.confidence as keyof typeof confidence]++;
    decidedBy[row.decidedBy as keyof typeof decidedBy]++;
    if (row.redshift < low) low = row.redshift;
    if (row.redshift > high) high = row.redshift;
    if (row.redshiftError !== null) velocityErrors.push((SPEED_OF_LIGHT_KMS * row.redshiftError) / (1 + row.redshift));
  }
  return {
    confidence,
    decidedBy,
    redshiftRange: rows.length ? [low, high] : null,
    medianVelocityErrorKms: median(velocityErrors),
  };
}

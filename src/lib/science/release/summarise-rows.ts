import type { ReleaseRow } from '$lib/domain/release';
import type { ReleaseSummary } from '$lib/domain/release-summary';
import { SPEED_OF_LIGHT_KMS } from '../constants/physical';

/** About this many bins over the range of redshift; the width is 1, 2 or 5 times a power of ten. */
const BINS = 30;

function niceWidth(span: number): number {
  const raw = span / BINS;
  const power = 10 ** Math.floor(Math.log10(raw));
  const step = [1, 2, 5, 10].find((factor) => factor * power >= raw * (1 - 1e-9)) ?? 10;
  return Number((step * power).toPrecision(1));
}

function median(values: number[]): number | null {
  if (values.length === 0) return null;
  const sorted = [...values].sort((a, b) => a - b);
  const middle = sorted.length >> 1;
  return sorted.length % 2 ? sorted[middle] : (sorted[middle - 1] + sorted[middle]) / 2;
}

/**
 * Counts and figures of a release, for its page. Velocity errors are c sigma_z / (1 + z), km/s; rows without an error
 * are left out of their median. Without rows ranges and medians are null and the histogram is empty.
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
    histogram: histogramOf(rows, low, high),
  };
}

function histogramOf(rows: readonly ReleaseRow[], low: number, high: number): ReleaseSummary['histogram'] {
  if (rows.length === 0) return { start: 0, width: 0.05, bins: [] };
  const width = niceWidth(Math.max(high - low, 0.1));
  const first = Math.floor(low / width);
  const bins = Array.from({ length: Math.floor(high / width) - first + 1 }, () => ({
    secure: 0,
    probable: 0,
    ambiguous: 0,
  }));
  for (const row of rows) {
    const bin = Math.min(bins.length - 1, Math.floor(row.redshift / width) - first);
    bins[bin][row.confidence as 'secure' | 'probable' | 'ambiguous']++;
  }
  return { start: Number((first * width).toPrecision(12)), width, bins };
}

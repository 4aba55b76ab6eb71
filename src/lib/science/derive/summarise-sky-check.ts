/** One spectrum's zero point by the sky's own lines. */
export interface SkyCheck {
  id: string;
  name: string;
  /** Mid-exposure, milliseconds since 1970 UTC; null where the file does not say. */
  timeMs: number | null;
  offsetKms: number;
  /** Robust scatter of one sky line's offset, km/s. */
  scatterKms: number;
}

export interface SkyCheckSummary<T extends SkyCheck> {
  count: number;
  /** Median offset of the night and its standard error, km/s; the error is null for fewer than three spectra. */
  zeroPointKms: number;
  zeroPointErrorKms: number | null;
  /** Robust scatter between spectra, km/s (1.4826 MAD). */
  scatterKms: number;
  /** Change through the night, km/s an hour, and its standard error; null where time or spread does not allow it. */
  drift: { kmsPerHour: number; errorKmsPerHour: number } | null;
  /** Spectra off the night's zero point, the worst first. */
  outliers: T[];
}

/** Offsets within this of the zero point pass whatever the scatter: a tenth of a usual pixel. Common practice, no source. */
export const SKY_TOLERANCE_KMS = 5;
/** Beyond that, this many robust standard deviations make an outlier. Common practice, no source. */
const OUTLIER_SIGMA = 4;
/** Exposures closer together than this say nothing of a drift. */
const LEAST_SPAN_HOURS = 1;
const LEAST_FOR_DRIFT = 6;
const MS_AN_HOUR = 3_600_000;

function median(values: number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = sorted.length >> 1;
  return sorted.length % 2 === 1 ? sorted[middle] : (sorted[middle - 1] + sorted[middle]) / 2;
}

/**
 * The wavelength scale of a whole night: median zero point, scatter between spectra, drift through the night by least
 * squares, and the spectra that stand off.
 *
 * The standard error of a median is sqrt(pi / 2) sigma / sqrt(n) for a normal spread (Kendall and Stuart 1977, The
 * Advanced Theory of Statistics 1, section 10.10, from memory); sigma is 1.4826 times the median absolute deviation.
 *
 * @param checks one a spectrum that shows sky lines; others are left out by the caller
 * @returns null where there is none.
 */
export function summariseSkyCheck<T extends SkyCheck>(checks: readonly T[]): SkyCheckSummary<T> | null {
  if (checks.length === 0) return null;
  const zeroPointKms = median(checks.map(({ offsetKms }) => offsetKms));
  const away = (check: SkyCheck) => Math.abs(check.offsetKms - zeroPointKms);
  const scatterKms = 1.4826 * median(checks.map(away));
  const limit = Math.max(SKY_TOLERANCE_KMS, OUTLIER_SIGMA * scatterKms);
  return {
    count: checks.length,
    zeroPointKms,
    zeroPointErrorKms: checks.length < 3 ? null : (Math.sqrt(Math.PI / 2) * scatterKms) / Math.sqrt(checks.length),
    scatterKms,
    drift: driftOf(checks.filter((check) => away(check) <= limit)),
    outliers: checks.filter((check) => away(check) > limit).sort((a, b) => away(b) - away(a)),
  };
}

/** Slope of a straight line through offsets against time, with the error that the residuals give it. */
function driftOf(checks: readonly SkyCheck[]): SkyCheckSummary<SkyCheck>['drift'] {
  const points = checks.flatMap(({ timeMs, offsetKms }) =>
    timeMs === null ? [] : [{ hours: timeMs / MS_AN_HOUR, offsetKms }],
  );
  if (points.length < LEAST_FOR_DRIFT) return null;
  const mean = (values: number[]) => values.reduce((sum, value) => sum + value, 0) / values.length;
  const [middle, level] = [mean(points.map(({ hours }) => hours)), mean(points.map(({ offsetKms }) => offsetKms))];
  const hours = points.map((point) => point.hours - middle);
  const span = Math.max(...hours) - Math.min(...hours);
  if (span < LEAST_SPAN_HOURS) return null;
  const squares = hours.reduce((sum, hour) => sum + hour * hour, 0);
  const kmsPerHour = points.reduce((sum, { offsetKms }, i) => sum + hours[i] * (offsetKms - level), 0) / squares;
  const left = points.reduce((sum, { offsetKms }, i) => sum + (offsetKms - level - kmsPerHour * hours[i]) ** 2, 0);
  return { kmsPerHour, errorKmsPerHour: Math.sqrt(left / (points.length - 2) / squares) };
}

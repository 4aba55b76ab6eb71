/** Ends of the fixed bins of probability; finer near 1, where confidence is decided. */
export const PROBABILITY_BINS = [0, 0.1, 0.2, 0.3, 0.4, 0.5, 0.6, 0.7, 0.8, 0.9, 0.95, 0.99, 0.995, 1] as const;

export interface ReliabilityBin {
  from: number;
  to: number;
  count: number;
  /** Mean stated probability. */
  stated: number;
  /** Share that came true. */
  observed: number;
}

/** A stated probability and whether the event came true. */
export interface Forecast {
  probability: number;
  cameTrue: boolean;
}

/** Stated against observed frequency in the fixed bins; empty bins are left out. */
export function reliabilityBins(forecasts: readonly Forecast[]): ReliabilityBin[] {
  const bins: ReliabilityBin[] = [];
  for (let b = 0; b + 1 < PROBABILITY_BINS.length; b++) {
    const [from, to] = [PROBABILITY_BINS[b], PROBABILITY_BINS[b + 1]];
    const inside = forecasts.filter(({ probability: p }) => p >= from && (p < to || (to === 1 && p <= 1)));
    if (inside.length === 0) continue;
    bins.push({
      from,
      to,
      count: inside.length,
      stated: inside.reduce((sum, f) => sum + f.probability, 0) / inside.length,
      observed: inside.filter((f) => f.cameTrue).length / inside.length,
    });
  }
  return bins;
}

/**
 * Expected calibration error: mean |stated - observed| over fixed bins, weighted by their counts; NaN without forecasts.
 *
 * Source: Naeini, Cooper & Hauskrecht (2015, AAAI 29), eq. 1, with fixed instead of equal bins.
 */
export function expectedCalibrationError(forecasts: readonly Forecast[]): number {
  const bins = reliabilityBins(forecasts);
  return bins.reduce((sum, bin) => sum + bin.count * Math.abs(bin.stated - bin.observed), 0) / forecasts.length;
}

const SIZE = 420;
const MARGIN = 48;

/** Reliability diagram as SVG: stated probability against observed share with 1 sigma binomial bars, area of dots by count. */
export function reliabilitySvg(bins: readonly ReliabilityBin[], title: string): string {
  const place = (value: number) => MARGIN + value * (SIZE - 2 * MARGIN);
  const up = (value: number) => SIZE - place(value);
  const total = bins.reduce((sum, bin) => sum + bin.count, 0);
  const dots = bins.map((bin) => {
    const bar = Math.sqrt(Math.max((bin.observed * (1 - bin.observed)) / bin.count, 0.25 / bin.count ** 2));
    const x = place(bin.stated).toFixed(1);
    const radius = (2 + 10 * Math.sqrt(bin.count / total)).toFixed(1);
    return (
      `<line x1="${x}" x2="${x}" y1="${up(Math.min(1, bin.observed + bar)).toFixed(1)}" ` +
      `y2="${up(Math.max(0, bin.observed - bar)).toFixed(1)}" stroke="#0072b2"/>` +
      `<circle cx="${x}" cy="${up(bin.observed).toFixed(1)}" r="${radius}" fill="#0072b2" fill-opacity="0.7">` +
      `<title>${bin.count} stated ${bin.stated.toFixed(3)}, came true ${bin.observed.toFixed(3)}</title></circle>`
    );
  });
  const ticks = [0, 0.25, 0.5, 0.75, 1].map(
    (t) =>
      `<text x="${place(t)}" y="${SIZE - MARGIN + 18}" text-anchor="middle">${t}</text>` +
      `<text x="${MARGIN - 8}" y="${up(t) + 4}" text-anchor="end">${t}</text>`,
  );
  return [
    `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 ${SIZE} ${SIZE}" font-family="sans-serif" font-size="12">`,
    `<title>${title}</title><rect width="${SIZE}" height="${SIZE}" fill="#fff"/>`,
    `<text x="${SIZE / 2}" y="22" text-anchor="middle" font-size="13">${title}</text>`,
    `<rect x="${MARGIN}" y="${MARGIN}" width="${SIZE - 2 * MARGIN}" height="${SIZE - 2 * MARGIN}" fill="none" stroke="#444"/>`,
    `<line x1="${place(0)}" y1="${up(0)}" x2="${place(1)}" y2="${up(1)}" stroke="#444" stroke-dasharray="4 3"/>`,
    ...dots,
    ...ticks,
    `<text x="${SIZE / 2}" y="${SIZE - 8}" text-anchor="middle">stated probability</text>`,
    `<text transform="translate(14 ${SIZE / 2}) rotate(-90)" text-anchor="middle">share within 1,000 km/s</text>`,
    '</svg>',
    '',
  ].join('\n');
}

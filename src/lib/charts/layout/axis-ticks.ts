import { tickStep, ticks } from 'd3';

/** Ticks of an axis in steps of 1, 2 or 5 times a power of ten. */
export interface AxisTicks {
  values: number[];
  step: number;
  /** Decimals that tell neighbouring ticks apart. */
  decimals: number;
}

/** About `count` ticks between two ends; an empty or reversed range has none. */
export function axisTicks(from: number, to: number, count: number): AxisTicks {
  if (!(to > from) || !(count >= 1)) return { values: [], step: NaN, decimals: 0 };
  const step = tickStep(from, to, count);
  // The small term keeps 0.1 (log10 = -1 exactly, or a hair below) at one decimal.
  return { values: ticks(from, to, count), step, decimals: Math.max(0, -Math.floor(Math.log10(step) + 1e-9)) };
}

/**
 * The power of ten taken out of an axis so that its labels stay short: 0 while the largest value lies from 0.01 to
 * under 100,000, else the decade of that value. A largest value of zero or not finite gives 0.
 */
export function axisExponent(largest: number): number {
  const size = Math.abs(largest);
  if (!(size > 0) || !Number.isFinite(size) || (size >= 0.01 && size < 1e5)) return 0;
  return Math.floor(Math.log10(size));
}

/** The largest of 1, 2, 5 times a power of ten that does not pass `most`; NaN where `most` is not positive. */
export function roundBelow(most: number): number {
  if (!(most > 0) || !Number.isFinite(most)) return NaN;
  const decade = 10 ** Math.floor(Math.log10(most));
  return decade * (most >= 5 * decade ? 5 : most >= 2 * decade ? 2 : 1);
}

import { SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';

/** One spectrum of a target with its redshift and the error quoted for it. */
export interface RepeatedAnswer {
  id: string;
  targetId: string;
  redshift: number;
  redshiftError: number;
}

/** Two spectra of a target that follow one another in time. */
export interface RepeatPair<Answer extends RepeatedAnswer> {
  first: Answer;
  second: Answer;
  /** c (z2 - z1) / (1 + z1), km/s. */
  differenceKms: number;
  /** Error of the difference by what is quoted for both, km/s. */
  errorKms: number;
  /** Difference over its error. */
  pull: number;
  /** They are not one redshift: more than 1,000 km/s apart. */
  isOther: boolean;
}

/** What repeats say of the quoted errors. */
export interface RepeatFigures {
  /** Pairs of one redshift. */
  pairs: number;
  /** Pairs of two different redshifts: wrong lines, not wrong errors. */
  others: number;
  /** Median of |pull| / 0.6745, which is 1 for honest Gaussian errors; null for fewer than three pairs. */
  robustWidth: number | null;
  /** Standard error of it: 1.1664 x width / sqrt(pairs); null as it. */
  robustWidthError: number | null;
  /** Median |difference|, km/s; null without pairs. */
  medianDifferenceKms: number | null;
}

/** Beyond this two redshifts are different answers. */
const OTHER_KMS = 1000;
/** Median of |x| for a unit Gaussian: its third quartile. */
export const HALF_NORMAL_MEDIAN = 0.6745;
const FEWEST_PAIRS = 3;

/**
 * Pairs spectra of each target with the next in time, so that n spectra make n - 1 pairs. All pairs of n would count each
 * spectrum n - 1 times.
 *
 * @param answers in the order of time, of spectra that share no photons
 */
export function pairRepeats<Answer extends RepeatedAnswer>(answers: readonly Answer[]): RepeatPair<Answer>[] {
  const last = new Map<string, Answer>();
  const pairs: RepeatPair<Answer>[] = [];
  for (const second of answers) {
    const first = last.get(second.targetId);
    last.set(second.targetId, second);
    if (!first) continue;
    const scale = SPEED_OF_LIGHT_KMS / (1 + first.redshift);
    const differenceKms = scale * (second.redshift - first.redshift);
    const errorKms = scale * Math.hypot(first.redshiftError, second.redshiftError);
    const pull = differenceKms / errorKms;
    pairs.push({ first, second, differenceKms, errorKms, pull, isOther: Math.abs(differenceKms) > OTHER_KMS });
  }
  return pairs;
}

function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = sorted.length >> 1;
  return sorted.length % 2 ? sorted[middle] : (sorted[middle - 1] + sorted[middle]) / 2;
}

/**
 * Whether the quoted errors are honest: the robust width of the pulls, median |pull| / 0.6745, is 1 where they are, over
 * 1 where they are too small. One wild pair moves it little.
 *
 * Source: the median absolute deviation of a Gaussian is 0.6745 sigma; as an estimate of sigma its efficiency is 0.37, so
 * its standard error is sigma / sqrt(2 x 0.3675 n) = 1.1664 sigma / sqrt(n) (Rousseeuw & Croux 1993, JASA 88, 1273;
 * from memory).
 */
export function judgeErrors(pairs: readonly RepeatPair<RepeatedAnswer>[]): RepeatFigures {
  const same = pairs.filter(({ isOther }) => !isOther);
  const width =
    same.length >= FEWEST_PAIRS ? median(same.map(({ pull }) => Math.abs(pull))) / HALF_NORMAL_MEDIAN : null;
  return {
    pairs: same.length,
    others: pairs.length - same.length,
    robustWidth: width,
    robustWidthError: width === null ? null : (1.1664 * width) / Math.sqrt(same.length),
    medianDifferenceKms: same.length ? median(same.map(({ differenceKms }) => Math.abs(differenceKms))) : null,
  };
}

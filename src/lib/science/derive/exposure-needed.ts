/** A line of the likeliest answer as it stands now. */
export interface PresentLine {
  line: string;
  signalToNoise: number;
}

/** What a doubtful spectrum has so far. */
export interface PresentSignal {
  /** null where the file does not say. */
  exposureSeconds: number | null;
  /** Calibrated probability of the likeliest answer. */
  probability: number;
  /** Lines of the likeliest answer; empty where it rests on absorption. */
  lines: readonly PresentLine[];
}

/** What it would take. */
export interface ExposureNeeded {
  /** Total exposure over the present one; over 1. */
  factor: number;
  /** Seconds still to add; null where the present exposure is not known. */
  extraSeconds: number | null;
  /** The weaker line does not show yet, so that the true need may be larger. */
  atLeast: boolean;
  /** What holds the answer back. */
  limitedBy: 'second line' | 'probability';
  /** The line that decides: now, and with the exposure added; null name where no second line was fitted. */
  decisive: { line: string | null; now: number; then: number };
}

/** A secure answer takes two lines of this signal-to-noise from different transitions, and this probability. */
const SECURE_SIGNAL_TO_NOISE = 4;
const SECURE_PROBABILITY = 0.995;
/** A line weaker than this does not show: this is put in its place, and the result is a lower bound. */
const LEAST_SHOWN = 1;

/** Lines that share their upper level have a fixed ratio, and an unresolved pair is one feature: each set counts once. */
const TIED: readonly (readonly string[])[] = [
  ['[O III] 5008', '[O III] 4960'],
  ['[N II] 6585', '[N II] 6550'],
  ['[O I] 6302', '[O I] 6366'],
  ['[O II] 3727', '[O II] 3730'],
  ['[Ne III] 3870', '[Ne III] 3969'],
  ['[Ne V] 3427', '[Ne V] 3347'],
  ['[S III] 9533', '[S III] 9071'],
  ['C IV 1548', 'C IV 1551'],
  ['Mg II 2796', 'Mg II 2804'],
];

/** The strongest line of each independent feature, the strongest first. */
export function independentLines(lines: readonly PresentLine[]): PresentLine[] {
  const best = new Map<string, PresentLine>();
  for (const line of lines) {
    const feature = TIED.find((set) => set.includes(line.line))?.[0] ?? line.line;
    const before = best.get(feature);
    if (!before || line.signalToNoise > before.signalToNoise) best.set(feature, line);
  }
  return [...best.values()].sort((a, b) => b.signalToNoise - a.signalToNoise);
}

/**
 * The exposure still needed to make a doubtful answer secure.
 *
 * Assumes that signal-to-noise grows with the square root of exposure time (background-limited: same sky, same seeing).
 * Where the second independent line is below 4, it must reach 4: t = t0 (4 / s)²; a line of S/N 4 raises the likelihood
 * by exp(8), more than the odds of 199 to 1 that a probability of 0.995 asks for. Where two lines are there already, the
 * log odds, which are differences of chi-square, must grow, in proportion to time, to ln(199): t = t0 ln(199) / ln(odds).
 *
 * @returns null where this says nothing: no emission line, odds below even with two lines seen, or nothing lacking that
 *   more light would bring.
 *
 * @example
 * exposureNeeded({ exposureSeconds: 900, probability: 0.95,
 *   lines: [{ line: 'H-alpha 6565', signalToNoise: 12 }, { line: '[N II] 6585', signalToNoise: 2 }] })!.extraSeconds; // 2700
 */
export function exposureNeeded({ exposureSeconds, probability, lines }: PresentSignal): ExposureNeeded | null {
  const [first, second = null] = independentLines(lines);
  if (!first || !(first.signalToNoise > 0)) return null;
  const seconds = (factor: number) => (exposureSeconds === null ? null : exposureSeconds * (factor - 1));
  const now = Math.max(0, second?.signalToNoise ?? 0);
  if (now < SECURE_SIGNAL_TO_NOISE) {
    const factor = (SECURE_SIGNAL_TO_NOISE / Math.max(now, LEAST_SHOWN)) ** 2;
    const decisive = { line: second?.line ?? null, now, then: now * Math.sqrt(factor) };
    return { factor, extraSeconds: seconds(factor), atLeast: now < LEAST_SHOWN, limitedBy: 'second line', decisive };
  }
  if (!(probability > 0.5) || probability >= SECURE_PROBABILITY) return null;
  const logOdds = (p: number) => Math.log(p / (1 - p));
  const factor = logOdds(SECURE_PROBABILITY) / logOdds(probability);
  const decisive = { line: second!.line, now, then: now * Math.sqrt(factor) };
  return { factor, extraSeconds: seconds(factor), atLeast: false, limitedBy: 'probability', decisive };
}

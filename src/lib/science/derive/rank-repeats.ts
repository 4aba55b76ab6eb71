import type { ExposureNeeded } from './exposure-needed';
import type { Span } from './dark-hours';

/** A target that another exposure might settle. */
export interface Repeat {
  /** What is open of its answer, bits (Shannon 1948). */
  openBits: number;
  needed: ExposureNeeded | null;
  /** Whether the site and the target's position are known; else nothing can be said of what is up. */
  placeKnown: boolean;
  /** When it can still be observed tonight; null where it can't. */
  up: Span | null;
}

/** How far tonight's time goes: all of it fits, a part does, the target is down, or it can't be said. */
export type Reach = 'fits' | 'in part' | 'down' | 'not known';

const SECONDS_AN_HOUR = 3600;
/** Pointing at a target and starting an exposure takes this long: less is no time. Common practice, no source. */
const LEAST_MS = 300_000;

/** Whether what is needed fits into the time that is left. */
export function reachOf({ needed, up, placeKnown }: Repeat): Reach {
  if (!placeKnown) return 'not known';
  if (!up || up.untilMs - up.fromMs < LEAST_MS) return 'down';
  if (!needed || needed.extraSeconds === null) return 'not known';
  return needed.extraSeconds * 1000 <= up.untilMs - up.fromMs ? 'fits' : 'in part';
}

/** Worth of pointing again: bits settled for an hour of exposure; null where the exposure can't be said. */
export function worthBitsPerHour({ openBits, needed }: Repeat): number | null {
  if (!needed || needed.extraSeconds === null || !(needed.extraSeconds > 0)) return null;
  return openBits / (needed.extraSeconds / SECONDS_AN_HOUR);
}

const REACHES: readonly Reach[] = ['fits', 'in part', 'not known', 'down'];

/**
 * Targets in the order of what pointing at them again brings: those whose exposure fits into what is left of the night,
 * then those that it fits in part, then the rest; within each by bits settled for an hour; lower bounds and those
 * without a figure after the others. Does not change its input.
 */
export function rankRepeats<T extends Repeat>(repeats: readonly T[]): T[] {
  const key = (repeat: T) => [
    REACHES.indexOf(reachOf(repeat)),
    repeat.needed?.atLeast ? 1 : 0,
    -(worthBitsPerHour(repeat) ?? -1),
  ];
  return [...repeats].sort((a, b) => {
    const [x, y] = [key(a), key(b)];
    return x[0] - y[0] || x[1] - y[1] || x[2] - y[2];
  });
}

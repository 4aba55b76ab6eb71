import type { Site } from '$lib/domain/site';
import { sineOfAltitude, type SkyPlace } from './airmass';
import type { Span } from './dark-hours';

/** Nothing rises and sets within this: the sampling misses no window worth pointing at. */
const STEP_MS = 600_000;
/** Crossings are found to this. */
const PRECISION_MS = 1_000;

/**
 * When a place stands at an airmass of at most `most` within a span, found by halving to a second.
 *
 * @param most the airmass, over 1
 * @returns the stretches in order; empty where it never does.
 */
export function hoursAbove(place: SkyPlace, site: Site, { fromMs, untilMs }: Span, most: number): Span[] {
  const above = (timeMs: number) => sineOfAltitude(place, site, timeMs) >= 1 / most;
  const crossing = (lowMs: number, highMs: number) => {
    const before = above(lowMs);
    while (highMs - lowMs > PRECISION_MS) {
      const middle = (lowMs + highMs) / 2;
      if (above(middle) === before) lowMs = middle;
      else highMs = middle;
    }
    return (lowMs + highMs) / 2;
  };
  const spans: Span[] = [];
  let since: number | null = above(fromMs) ? fromMs : null;
  for (let timeMs = fromMs; timeMs < untilMs; timeMs += STEP_MS) {
    const nextMs = Math.min(timeMs + STEP_MS, untilMs);
    const isUp = above(nextMs);
    if (isUp === (since !== null)) continue;
    const at = crossing(timeMs, nextMs);
    if (since !== null) spans.push({ fromMs: since, untilMs: at });
    since = isUp ? at : null;
  }
  if (since !== null && untilMs > fromMs) spans.push({ fromMs: since, untilMs });
  return spans;
}

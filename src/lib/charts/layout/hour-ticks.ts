const MINUTE_MS = 60_000;
/** Steps that a clock has, minutes. */
const STEPS = [5, 10, 15, 30, 60, 120, 180, 360, 720, 1440];

/** Moments on whole clock steps between two times, milliseconds since 1970 UTC: at most about `count`; none for an empty range. */
export function hourTicks(fromMs: number, toMs: number, count: number): number[] {
  if (!(toMs > fromMs) || !(count >= 1)) return [];
  const wanted = (toMs - fromMs) / MINUTE_MS / count;
  const step = (STEPS.find((minutes) => minutes >= wanted) ?? Math.ceil(wanted / 1440) * 1440) * MINUTE_MS;
  const ticks: number[] = [];
  for (let time = Math.ceil(fromMs / step) * step; time <= toMs; time += step) ticks.push(time);
  return ticks;
}

/** The queue as the page has it: ids in order, and those with a verdict of this person. */
interface Queue {
  ids: readonly string[];
  done: readonly string[];
}

/** The next `count` spectra without a verdict after `here`, going round to the start; never `here` itself. */
export function upcoming(queue: Queue, here: string, count: number): string[] {
  const at = queue.ids.indexOf(here);
  const done = new Set(queue.done);
  return [...queue.ids.slice(at + 1), ...queue.ids.slice(0, Math.max(0, at))]
    .filter((id) => id !== here && !done.has(id))
    .slice(0, count);
}

/** The spectrum before or after `here`, judged or not; null at the ends and for a spectrum outside the queue. */
export function neighbour(ids: readonly string[], here: string, by: 1 | -1): string | null {
  const at = ids.indexOf(here);
  return at < 0 ? null : (ids[at + by] ?? null);
}

/** Marks nearer than this to the one before are merged: fast events would otherwise fill the window. */
const MERGE_MS = 200;
/** Nothing is said of a speed before this much time has been seen. */
const LEAST_SPAN_MS = 800;

/** Speed of a count that grows, over the last seconds; says when the rest will be there. Times in milliseconds. */
export class Rate {
  #marks: { at: number; count: number }[] = [];

  /** @param windowMs how far back the speed looks */
  constructor(private readonly windowMs = 8_000) {}

  /** Notes the count at a moment. A count that falls, as when a list is cleared, starts afresh. */
  mark(count: number, at: number): void {
    const last = this.#marks.at(-1);
    if (last && count < last.count) this.#marks = [];
    if (this.#marks.length > 1 && last && at - this.#marks[this.#marks.length - 2].at < MERGE_MS) {
      last.count = count;
      last.at = at;
    } else {
      this.#marks.push({ at, count });
    }
    // One mark from before the window stays, so that a slow count still has a span to be measured over.
    while (this.#marks.length > 2 && at - this.#marks[1].at > this.windowMs) this.#marks.shift();
  }

  /** Counts a second; null where too little was seen or nothing has come for a whole window. */
  perSecond(at: number): number | null {
    const first = this.#marks[0];
    const last = this.#marks.at(-1);
    if (!first || !last) return null;
    const span = at - first.at;
    if (span < LEAST_SPAN_MS || at - last.at > this.windowMs || last.count === first.count) return null;
    return ((last.count - first.count) * 1000) / span;
  }

  /** Seconds until `remaining` more are there at the present speed; null where that is not known. */
  secondsLeft(remaining: number, at: number): number | null {
    const speed = this.perSecond(at);
    return speed === null ? null : remaining / speed;
  }
}

/** Longer without a touch, and the person is elsewhere: what goes beyond does not count. */
const IDLE_MS = 60_000;
/** A look that took longer was left lying and taken up again. */
const MOST_SECONDS = 900;

/**
 * Measures how long a person looks at a spectrum: from when it is drawn, while the page is visible, each pause between two
 * touches (key, pointer, wheel) counting up to a minute. Times in ms on the page's own clock.
 */
export class LookClock {
  #counted = 0;
  /** The last touch that counts; null before the spectrum is drawn and while the page is hidden. */
  #last: number | null = null;
  #begun = false;

  /** The spectrum is drawn. Nothing happens at a second call. */
  begin(now: number, visible: boolean): void {
    if (this.#begun) return;
    this.#begun = true;
    this.#last = visible ? now : null;
  }

  /** A key, pointer or wheel was touched. */
  touch(now: number): void {
    if (this.#last === null) return;
    this.#counted += Math.min(IDLE_MS, Math.max(0, now - this.#last));
    this.#last = now;
  }

  /** The page came into sight or went out of it. */
  turn(now: number, visible: boolean): void {
    if (!this.#begun) return;
    if (!visible) {
      this.touch(now);
      this.#last = null;
    } else this.#last ??= now;
  }

  /** Seconds looked until now, at most 900; null where the spectrum was never drawn. */
  seconds(now: number): number | null {
    if (!this.#begun) return null;
    this.touch(now);
    return Math.min(MOST_SECONDS, this.#counted / 1000);
  }
}

import type { NightSnapshot } from '$lib/domain/night';
import { Rate } from './rate';

const POLL_MS = 3_000;
/** Polling tries an event stream again after this many looks. */
const LOOKS_BEFORE_STREAM = 10;
/** Longer than any one file or fit takes: after this something is amiss with the workers. */
const STANDSTILL_MS = 30_000;

/** A night as it changes: by server-sent events, by polling where these fail. */
export class LiveNight {
  snapshot = $state.raw<NightSnapshot>() as NightSnapshot;
  /** live: the stream is open; polling: looked at every few seconds; away: the last look failed; gone: no longer ours. */
  connection = $state<'opening' | 'live' | 'polling' | 'away' | 'gone'>('opening');
  spectraPerSecond = $state<number | null>(null);
  secondsLeft = $state<number | null>(null);
  /** Work waits, and nothing has moved for a while. */
  standsStill = $state(false);

  /** Not reactive: whoever opens or reads the stream must not do so again with every change. */
  private readonly nightId: string;
  private rate = new Rate(10_000);
  private source: EventSource | null = null;
  private timer: ReturnType<typeof setTimeout> | undefined;
  private still: ReturnType<typeof setTimeout> | undefined;
  private looks = 0;

  constructor(first: NightSnapshot) {
    this.snapshot = first;
    this.nightId = first.id;
  }

  /** Follows the night until the function it returns is called. */
  follow(): () => void {
    this.watch();
    this.openStream();
    return () => this.close();
  }

  /** Takes a snapshot unless a newer one is there. */
  take(snapshot: NightSnapshot): void {
    if (snapshot.revision < this.snapshot.revision) return;
    const moved = snapshot.revision > this.snapshot.revision;
    this.snapshot = snapshot;
    if (moved) this.watch();
    const now = performance.now();
    const { measured, waiting, total } = snapshot.spectra;
    // Files that wait to be read hold as many spectra each, most likely, as those that were.
    const { read, waiting: unread } = snapshot.files;
    const toCome = waiting + unread * (read > 0 ? total / read : 1);
    this.rate.mark(measured, now);
    this.spectraPerSecond = snapshot.done ? null : this.rate.perSecond(now);
    this.secondsLeft = snapshot.done ? null : this.rate.secondsLeft(toCome, now);
  }

  private watch(): void {
    clearTimeout(this.still);
    this.standsStill = false;
    if (!this.snapshot.done) this.still = setTimeout(() => (this.standsStill = true), STANDSTILL_MS);
  }

  private openStream(): void {
    this.looks = 0;
    const source = new EventSource(`/api/v1/nights/${this.nightId}/events`);
    this.source = source;
    source.onopen = () => (this.connection = 'live');
    source.addEventListener('night', (event) => {
      this.connection = 'live';
      this.take(JSON.parse(event.data) as NightSnapshot);
    });
    source.onerror = () => {
      // The browser opens a dropped stream again by itself; one that was refused stays closed.
      if (source.readyState === EventSource.CLOSED) {
        source.close();
        this.source = null;
        void this.look();
      } else this.connection = 'away';
    };
  }

  /** Reads the night once; with no stream open it goes on doing so. */
  async look(): Promise<void> {
    clearTimeout(this.timer);
    try {
      const response = await fetch(`/api/v1/nights/${this.nightId}`);
      if (response.ok) {
        this.take((await response.json()) as NightSnapshot);
        if (!this.source) this.connection = 'polling';
      } else if ([401, 403, 404].includes(response.status)) {
        this.close();
        this.connection = 'gone';
        return;
      } else this.connection = 'away';
    } catch {
      this.connection = 'away';
    }
    if (this.source) return;
    if (++this.looks >= LOOKS_BEFORE_STREAM && this.connection === 'polling') this.openStream();
    else this.timer = setTimeout(() => void this.look(), POLL_MS);
  }

  private close(): void {
    clearTimeout(this.timer);
    clearTimeout(this.still);
    this.source?.close();
    this.source = null;
  }
}

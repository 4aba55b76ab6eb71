import type { NightSnapshot } from '$lib/domain/night';
import { Rate } from './rate';

const POLL_MS = 3_000;
/** Polling tries an event stream again after this many looks. */
const LOOKS_BEFORE_STREAM = 10;

/** A night as it changes: by server-sent events, by polling where these fail. */
export class LiveNight {
  snapshot = $state.raw<NightSnapshot>() as NightSnapshot;
  /** live: the stream is open; polling: looked at every few seconds; away: the last look failed; gone: no longer ours. */
  connection = $state<'opening' | 'live' | 'polling' | 'away' | 'gone'>('opening');
  spectraPerSecond = $state<number | null>(null);
  secondsLeft = $state<number | null>(null);

  private rate = new Rate(10_000);
  private source: EventSource | null = null;
  private timer: ReturnType<typeof setTimeout> | undefined;
  private looks = 0;

  constructor(first: NightSnapshot) {
    this.snapshot = first;
  }

  /** Follows the night until the function it returns is called. */
  follow(): () => void {
    this.openStream();
    return () => this.close();
  }

  /** Takes a snapshot unless a newer one is there. */
  take(snapshot: NightSnapshot): void {
    if (snapshot.id !== this.snapshot.id || snapshot.revision < this.snapshot.revision) return;
    this.snapshot = snapshot;
    const now = performance.now();
    const { measured, waiting } = snapshot.spectra;
    this.rate.mark(measured, now);
    this.spectraPerSecond = snapshot.done ? null : this.rate.perSecond(now);
    this.secondsLeft = snapshot.done ? null : this.rate.secondsLeft(waiting, now);
  }

  private openStream(): void {
    this.looks = 0;
    const source = new EventSource(`/api/v1/nights/${this.snapshot.id}/events`);
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
      const response = await fetch(`/api/v1/nights/${this.snapshot.id}`);
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
    this.source?.close();
    this.source = null;
  }
}

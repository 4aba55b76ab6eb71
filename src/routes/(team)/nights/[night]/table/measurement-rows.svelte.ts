import type { NightMeasurement } from '$lib/domain/night';

/** A page of rows: the API's own limit. */
const PAGE_ROWS = 5_000;
/** While a night is measured its rows are read again at most this often, and never more than a tenth of the time. */
const AT_MOST_EVERY_MS = 2_000;
const SHARE_OF_TIME = 10;

/** The rows of a night's table, read again as the night goes on. A fault keeps the rows that were there, marked old. */
export class MeasurementRows {
  rows = $state.raw<NightMeasurement[]>([]);
  /** Whether an answer was ever had. */
  loaded = $state(false);
  /** Why the last reading failed, or null. */
  fault = $state<string | null>(null);

  private wanted = -1;
  private held = -1;
  private reading = false;
  private timer: ReturnType<typeof setTimeout> | undefined;
  private stopped = false;

  constructor(private readonly nightId: string) {}

  /** Asks for the rows of at least this revision of the night. */
  want(revision: number): void {
    this.wanted = Math.max(this.wanted, revision);
    if (!this.reading && this.wanted > this.held) void this.read();
  }

  stop(): void {
    this.stopped = true;
    clearTimeout(this.timer);
  }

  private async read(): Promise<void> {
    this.reading = true;
    const revision = this.wanted;
    const started = performance.now();
    try {
      const rows = await readAll(this.nightId);
      if (this.stopped) return;
      this.rows = rows;
      this.held = revision;
      this.loaded = true;
      this.fault = null;
    } catch (error) {
      this.fault = error instanceof Error ? error.message : String(error);
    }
    const took = performance.now() - started;
    this.timer = setTimeout(
      () => {
        this.reading = false;
        if (this.wanted > this.held && !this.stopped) void this.read();
      },
      Math.max(AT_MOST_EVERY_MS, SHARE_OF_TIME * took),
    );
  }
}

async function readAll(nightId: string): Promise<NightMeasurement[]> {
  const rows: NightMeasurement[] = [];
  let cursor: string | null = null;
  do {
    const query: string = `detail=table&limit=${PAGE_ROWS}${cursor ? `&cursor=${encodeURIComponent(cursor)}` : ''}`;
    const response = await fetch(`/api/v1/nights/${nightId}/measurements?${query}`).catch(() => {
      throw new Error('The server does not answer.');
    });
    const body = (await response.json().catch(() => ({}))) as {
      rows?: NightMeasurement[];
      next?: string | null;
      detail?: string;
    };
    if (!response.ok || !body.rows) throw new Error(body.detail ?? `The server answered with ${response.status}.`);
    rows.push(...body.rows);
    cursor = body.next ?? null;
  } while (cursor);
  return rows;
}

import { SvelteMap } from 'svelte/reactivity';
import { Rate } from '../rate';
import type { Collected } from './collect-dropped';
import { matchAnswer } from './match-answer';
import { nextBatch } from './next-batch';
import { sendBatch, type BatchResult } from './send-batch';
import { UploadEntry, type EntryState } from './upload-entry.svelte';

/** Requests at once: browsers keep six connections a server, and the page itself needs some of them. */
const REQUESTS = 3;
/** Waits before a broken request is tried again, milliseconds; after the last the upload pauses and says so. */
const AGAIN_AFTER_MS = [1_000, 3_000, 8_000];
/** A pause ends by itself after this long, for those who sleep; a person may end it at once. */
const PAUSE_MS = 15_000;

/** The files a person gives to one night: sent a few at a time, each with its own fate. */
export class Upload {
  entries = $state.raw<UploadEntry[]>([]);
  /** Bytes sent so far of each request that is on its way. */
  private inFlight = new SvelteMap<number, number>();
  /** Why sending stands still, or null. */
  paused = $state<string | null>(null);
  /** Left out before sending: hidden files, and paths the browser could not read. */
  leftOut = $state<{ hidden: number; unreadable: string[] }>({ hidden: 0, unreadable: [] });
  bytesPerSecond = $state<number | null>(null);
  filesPerSecond = $state<number | null>(null);
  secondsLeft = $state<number | null>(null);

  tally = $derived.by(() => {
    const counts: Record<EntryState, number> = {
      waiting: 0,
      sending: 0,
      taken: 0,
      already: 0,
      refused: 0,
      cancelled: 0,
    };
    let bytesSettled = 0;
    let bytesTotal = 0;
    for (const { state, sizeBytes } of this.entries) {
      counts[state]++;
      if (state !== 'cancelled') bytesTotal += sizeBytes;
      if (state === 'taken' || state === 'already' || state === 'refused') bytesSettled += sizeBytes;
    }
    return { ...counts, total: this.entries.length, bytesSettled, bytesTotal };
  });
  bytesSent = $derived(this.tally.bytesSettled + [...this.inFlight.values()].reduce((sum, bytes) => sum + bytes, 0));
  active = $derived(this.tally.waiting + this.tally.sending > 0);
  /** Grows with each request that ended; the page looks at the night again when it does. */
  answers = $state(0);

  private waiting: UploadEntry[] = [];
  private abort = new AbortController();
  private running = 0;
  private broken = 0;
  private requests = 0;
  private pause: ReturnType<typeof setTimeout> | undefined;
  private byteRate = new Rate();
  private fileRate = new Rate();

  constructor(private readonly nightId: string) {}

  add({ found, hidden, unreadable }: Collected): void {
    const added = found.map(({ file, path }) => new UploadEntry(file, path));
    this.leftOut = {
      hidden: this.leftOut.hidden + hidden,
      unreadable: [...this.leftOut.unreadable, ...unreadable],
    };
    this.entries = [...this.entries, ...added];
    this.waiting.push(...added);
    this.run();
  }

  /** Stops sending. What is on its way may still arrive; sending it again does no harm. */
  cancel(): void {
    this.waiting = [];
    for (const entry of this.entries) {
      if (entry.state === 'waiting' || entry.state === 'sending') entry.state = 'cancelled';
    }
    clearTimeout(this.pause);
    this.paused = null;
    this.abort.abort();
    this.abort = new AbortController();
  }

  /** Sends what was cancelled after all. */
  sendCancelled(): void {
    const again = this.entries.filter((entry) => entry.state === 'cancelled');
    for (const entry of again) entry.state = 'waiting';
    this.waiting.push(...again);
    this.goOn();
  }

  /** Ends a pause: a person's wish, the browser's word that the network is back, or time. */
  goOn(): void {
    clearTimeout(this.pause);
    this.paused = null;
    this.broken = 0;
    this.run();
  }

  /** Forgets the list of an upload that has ended. */
  clear(): void {
    if (this.active) return;
    this.entries = [];
    this.leftOut = { hidden: 0, unreadable: [] };
  }

  private run(): void {
    while (this.running < REQUESTS && this.waiting.length > 0 && this.paused === null) {
      const batch = this.waiting.splice(0, nextBatch(this.waiting));
      this.running++;
      void this.send(batch).finally(() => {
        this.running--;
        this.run();
      });
    }
  }

  private async send(batch: UploadEntry[]): Promise<void> {
    const request = ++this.requests;
    for (const entry of batch) entry.state = 'sending';
    const { signal } = this.abort;
    const result = await sendBatch(this.nightId, batch, signal, (bytes) => {
      this.inFlight.set(request, bytes);
      this.time();
    });
    this.inFlight.delete(request);
    if (signal.aborted) return;
    this.answers++;
    await this.settle(batch, result);
    this.time();
  }

  private async settle(batch: UploadEntry[], result: BatchResult): Promise<void> {
    if (result.kind === 'answered') {
      this.broken = 0;
      const outcomes = matchAnswer(
        batch.map(({ name }) => name),
        result.answer,
      );
      outcomes.forEach((outcome, i) => {
        if (outcome.state === 'refused') batch[i].refuse(outcome.what, outcome.mend);
        else if (outcome.state === 'unknown') this.putBack([batch[i]]);
        else batch[i].state = outcome.state;
      });
    } else if (result.kind === 'refused') {
      this.settleRefused(batch, result);
    } else if (result.kind === 'broken') {
      await this.settleBroken(batch, result.what);
    }
  }

  private settleRefused(batch: UploadEntry[], refusal: { status: number; what: string; mend: string }): void {
    const ofTheFiles = [413, 415, 422].includes(refusal.status);
    if (ofTheFiles && batch.length > 1) {
      // Each has its own reason, and only the first was told.
      for (const entry of batch) entry.alone = true;
      this.putBack(batch);
      return;
    }
    for (const entry of batch) entry.refuse(refusal.what, refusal.mend);
    if (ofTheFiles) return;
    // What keeps one file out here keeps out all: no right, or no such night any more.
    for (const entry of this.waiting) entry.refuse(refusal.what, refusal.mend);
    this.waiting = [];
  }

  private async settleBroken(batch: UploadEntry[], what: string): Promise<void> {
    const readable = await Promise.all(batch.map(({ file }) => isReadable(file)));
    const lost = batch.filter((_, i) => !readable[i]);
    for (const entry of lost) entry.refuse('The browser can no longer read this file.', 'Drop it again.');
    this.putBack(batch.filter((_, i) => readable[i]));
    if (lost.length > 0) return;
    const wait = AGAIN_AFTER_MS[this.broken++];
    if (wait === undefined) {
      this.paused = what;
      clearTimeout(this.pause);
      this.pause = setTimeout(() => this.goOn(), PAUSE_MS);
    } else await new Promise((resolve) => setTimeout(resolve, wait));
  }

  private putBack(entries: UploadEntry[]): void {
    const still = entries.filter((entry) => entry.state === 'sending');
    for (const entry of still) entry.state = 'waiting';
    this.waiting.unshift(...still);
  }

  private time(): void {
    const now = performance.now();
    const { bytesTotal, waiting, sending, taken, already, refused } = this.tally;
    this.byteRate.mark(this.bytesSent, now);
    this.fileRate.mark(taken + already + refused, now);
    this.bytesPerSecond = this.byteRate.perSecond(now);
    this.filesPerSecond = this.fileRate.perSecond(now);
    // Large files wait for the line, many small ones for the server: the slower of the two says when it is over.
    const ends = [
      this.byteRate.secondsLeft(bytesTotal - this.bytesSent, now),
      this.fileRate.secondsLeft(waiting + sending, now),
    ].filter((seconds) => seconds !== null);
    this.secondsLeft = ends.length > 0 ? Math.max(...ends) : null;
  }
}

async function isReadable(file: File): Promise<boolean> {
  try {
    await file.slice(0, 1).arrayBuffer();
    return true;
  } catch {
    return false;
  }
}

// eslint-disable-next-line svelte/prefer-svelte-reactivity -- nothing draws this map; a page asks it once
const uploads = new Map<string, Upload>();

/** The upload of a night in this browser tab: it goes on while other pages are looked at. */
export function uploadOf(nightId: string): Upload {
  if (typeof window === 'undefined') return new Upload(nightId);
  if (!uploads.has(nightId)) {
    // Its derived values must outlive the page that asked first.
    $effect.root(() => void uploads.set(nightId, new Upload(nightId)));
  }
  return uploads.get(nightId)!;
}

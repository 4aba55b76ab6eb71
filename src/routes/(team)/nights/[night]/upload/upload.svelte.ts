import { SvelteMap } from 'svelte/reactivity';
import { withdraw } from './announce';
import type { Checker, Verdict } from './checker';
import type { Collected } from './collect-dropped';
import { isReadable } from './is-readable';
import { matchAnswer } from './match-answer';
import { nextBatch } from './next-batch';
import { sendBatch, type BatchResult } from './send-batch';
import { sendChunks } from './send-chunks';
import { tallyEntries } from './tally-entries';
import { UploadEntry } from './upload-entry.svelte';
import { UploadSpeed } from './upload-speed.svelte';

/** Requests at once: browsers keep six connections a server, and the page itself needs some of them. */
const REQUESTS = 3;
/** Waits before a broken request is tried again, milliseconds; after the last the upload pauses and says so. */
const AGAIN_AFTER_MS = [1_000, 3_000, 8_000];
/** A pause ends by itself after this long, for those who sleep; a person may end it at once. */
const PAUSE_MS = 15_000;
/** Files whose size is asked for before the page may draw again. */
const TAKEN_AT_ONCE = 50;
/** Answers that leave a file out before it is given up. */
const UNNAMED = 3;

/** The files a person gives to one night: sent a few at a time, each with its own fate. */
export class Upload {
  entries = $state.raw<UploadEntry[]>([]);
  /** Bytes sent so far of each request that is on its way. */
  private inFlight = new SvelteMap<number, number>();
  /** Why sending stands still, or null. */
  paused = $state<string | null>(null);
  /** Left out before sending: hidden files, and paths the browser could not read. */
  leftOut = $state<{ hidden: number; unreadable: string[] }>({ hidden: 0, unreadable: [] });
  readonly speed = new UploadSpeed();

  tally = $derived(tallyEntries(this.entries));
  bytesSent = $derived(this.tally.bytesSettled + [...this.inFlight.values()].reduce((sum, bytes) => sum + bytes, 0));
  active = $derived(this.tally.checking + this.tally.waiting + this.tally.sending > 0);
  /** Grows with each request that ended; the page looks at the night again when it does. */
  answers = $state(0);

  private waiting: UploadEntry[] = [];
  private abort = new AbortController();
  private running = 0;
  private broken = 0;
  private requests = 0;
  private pause: ReturnType<typeof setTimeout> | undefined;

  /** @param checker finds out what is there already before anything is sent; without it all is sent */
  constructor(
    private readonly nightId: string,
    private readonly checker: Checker | null = null,
  ) {}

  /** Takes files in, some at a time: the browser asks the disk for the size of each, and the page must not wait. */
  async add({ found, hidden, unreadable }: Collected): Promise<void> {
    const { leftOut } = this;
    this.leftOut = { hidden: leftOut.hidden + hidden, unreadable: [...leftOut.unreadable, ...unreadable] };
    const added: UploadEntry[] = [];
    for (let at = 0; at < found.length; at += TAKEN_AT_ONCE) {
      if (at > 0) await new Promise((resolve) => setTimeout(resolve));
      const some = found.slice(at, at + TAKEN_AT_ONCE).map(({ file, path }) => new UploadEntry(file, path));
      added.push(...some);
      this.entries = [...this.entries, ...some];
    }
    this.prepare(added.filter(({ state }) => state === 'waiting'));
  }

  /** Stops sending. What is on its way may still arrive; sending it again does no harm. */
  cancel(): void {
    this.waiting = [];
    const taken = this.entries.filter(({ state }) => ['checking', 'waiting', 'sending'].includes(state));
    for (const entry of taken) entry.state = 'cancelled';
    this.takeBack(taken);
    clearTimeout(this.pause);
    this.paused = null;
    this.abort.abort();
    this.abort = new AbortController();
  }

  /** Takes one file back while that still keeps it from being sent. What went up of a large one waits for a week. */
  cancelOne(entry: UploadEntry): void {
    if (!entry.canCancel) return;
    entry.state = 'cancelled';
    entry.abort?.abort();
    this.waiting = this.waiting.filter((other) => other !== entry);
    this.takeBack([entry]);
  }

  /** Sends what was cancelled after all. */
  sendCancelled(): void {
    this.prepare(this.entries.filter((entry) => entry.state === 'cancelled'));
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
    [this.entries, this.leftOut] = [[], { hidden: 0, unreadable: [] }];
  }

  private prepare(entries: UploadEntry[]): void {
    if (!this.checker) {
      for (const entry of entries) entry.state = 'waiting';
      this.waiting.push(...entries);
      return this.run();
    }
    for (const entry of entries) entry.state = 'checking';
    void this.checker.check(entries, (entry, verdict) => this.settleChecked(entry, verdict));
  }

  private settleChecked(entry: UploadEntry, verdict: Verdict): void {
    if (entry.state !== 'checking') return;
    entry.doneBytes = 0;
    if (verdict.state === 'refused') entry.refuse(verdict.what, verdict.mend);
    else if (verdict.state === 'already') entry.state = 'already';
    else {
      entry.state = 'waiting';
      this.waiting.push(entry);
      this.run();
    }
    if (verdict.state !== 'send') this.answers++;
  }

  /** Files that are not wanted any more are not missing either. The night's page offers it again where this fails. */
  private takeBack(entries: UploadEntry[]): void {
    if (!this.checker || entries.length === 0) return;
    const paths = entries.map(({ announcedPath }) => announcedPath);
    withdraw(this.nightId, paths).catch(() => {});
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
    const onSent = (bytes: number) => {
      if (batch[0].isLarge) batch[0].doneBytes = bytes;
      this.inFlight.set(request, bytes);
      this.time();
    };
    let result: BatchResult;
    if (batch[0].isLarge) {
      batch[0].abort = new AbortController();
      const either = AbortSignal.any([signal, batch[0].abort.signal]);
      result = await sendChunks(this.nightId, batch[0], either, onSent);
      batch[0].abort = null;
    } else result = await sendBatch(this.nightId, batch, signal, onSent);
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
        else if (outcome.state === 'unknown') this.askAgain(batch[i]);
        else if (outcome.state === 'archive') [batch[i].state, batch[i].isArchive] = ['taken', true];
        else batch[i].state = outcome.state;
      });
    } else if (result.kind === 'refused') {
      this.settleRefused(batch, result);
    } else if (result.kind === 'broken') {
      await this.settleBroken(batch, result.what);
    }
  }

  /** An answer that says nothing of a file is not to be trusted; one that never does ends in a refusal, not in a loop. */
  private askAgain(entry: UploadEntry): void {
    if (entry.unnamed++ < UNNAMED) this.putBack([entry]);
    else
      entry.refuse(
        'The server took it and did not say what became of it.',
        'Look for it in the night, or drop it again.',
      );
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
    const { bytesAlready, bytesTotal, checking, waiting, sending, taken, refused } = this.tally;
    this.speed.mark(
      { bytes: this.bytesSent - bytesAlready, files: taken + refused },
      { bytes: bytesTotal - this.bytesSent, files: checking + waiting + sending },
    );
  }
}

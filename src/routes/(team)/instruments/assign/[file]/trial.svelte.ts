import type { Trial, TrialAnswer } from '$lib/domain/column-assignment';

/** Typing ends before the file is read anew. */
const PAUSE_MS = 250;

/** Asks the server what an assignment would make of the file, the last one asked for only. */
export class TrialReading {
  answer = $state.raw<TrialAnswer | null>(null);
  /** Why there is no answer, when it is not the assignment's fault. */
  fault = $state('');
  pending = $state(false);
  private timer: ReturnType<typeof setTimeout> | undefined;
  private asked = '';

  constructor(private readonly address: string) {}

  /** Asks after a pause; null asks nothing and keeps nothing. */
  ask(assignment: Trial | null): void {
    const body = assignment === null ? '' : JSON.stringify(assignment);
    if (body === this.asked) return;
    this.asked = body;
    clearTimeout(this.timer);
    if (body === '') {
      this.answer = null;
      this.pending = false;
      return;
    }
    this.pending = true;
    this.timer = setTimeout(() => void this.read(body), PAUSE_MS);
  }

  stop(): void {
    clearTimeout(this.timer);
  }

  private async read(body: string): Promise<void> {
    const headers = { 'content-type': 'application/json' };
    try {
      const response = await fetch(this.address, { method: 'POST', headers, body });
      const told = (await response.json()) as TrialAnswer & { detail?: string };
      if (body !== this.asked) return;
      this.answer = response.ok ? told : null;
      this.fault = response.ok ? '' : (told.detail ?? 'The server could not read it.');
    } catch {
      if (body !== this.asked) return;
      this.answer = null;
      this.fault = 'The server did not answer; it is asked again with the next change.';
    }
    this.pending = false;
  }
}

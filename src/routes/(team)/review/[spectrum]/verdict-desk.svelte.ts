import { goto, invalidateAll } from '$app/navigation';
import { navigating } from '$app/state';
import type { SubmitFunction } from '@sveltejs/kit';
import { announcer } from '../../../announcer.svelte';
import type { LookClock } from './look-clock';
import type { ReviewState } from './review-state.svelte';
import { deserialize } from '$app/forms';

type Kind = Parameters<ReviewState['missing']>[0];

interface Context {
  review: ReviewState;
  name: string;
  /** The spectrum after this one, or null at the end of the queue. */
  next: string | null;
  addressOf: (id: string) => string;
}

/** A verdict the server did not take, kept whole so that nothing of it is lost. */
export interface UnstoredVerdict {
  spectrumId: string;
  name: string;
  reason: string;
  action: string;
  form: FormData;
}

/**
 * Hands verdicts to the server while the next spectrum is already on the desk: the page moves on at once, and a verdict
 * that was not stored is said, kept and can be sent again.
 */
export class VerdictDesk {
  /** What the last key press lacked; shown until something changes. */
  warning = $state<string | null>(null);
  unstored = $state.raw<UnstoredVerdict[]>([]);
  undoing = $state(false);
  /** Verdicts sent and not yet answered. */
  pending = $state(0);
  /** How long the spectrum on the desk has been looked at. */
  clock: LookClock | null = null;
  #context: () => Context;

  constructor(context: () => Context) {
    this.#context = context;
  }

  submit: SubmitFunction = ({ formData, submitter, cancel, action }) => {
    const { review, name, next, addressOf } = this.#context();
    if (review.given) return cancel();
    const kind = (submitter?.getAttribute('value') ?? 'candidate') as Kind;
    this.warning = review.missing(kind);
    if (this.warning) {
      announcer.say(this.warning);
      return cancel();
    }
    review.given = true;
    const seconds = this.clock?.seconds(performance.now()) ?? null;
    if (seconds !== null) formData.set('lookSeconds', seconds.toFixed(1));
    this.pending++;
    const said = kind === 'no redshift' ? 'no redshift' : `${review.redshift.toFixed(5)}, ${review.confidence}`;
    const sent = { spectrumId: review.id, name, action: action.toString(), form: formData };
    announcer.say(next ? `${said}, ${name}. Next spectrum.` : `${said}, ${name}. That was the last of this queue.`);
    if (next) void goto(addressOf(next), { keepFocus: true, noScroll: true });
    return async ({ result }) => {
      review.given = false;
      this.pending--;
      await this.#settle(result, sent, next);
    };
  };

  undo: SubmitFunction = ({ cancel }) => {
    if (this.undoing) return cancel();
    this.undoing = true;
    return async ({ result, update }) => {
      this.undoing = false;
      if (result.type === 'redirect') {
        announcer.say('The last verdict is taken back.');
        await goto(result.location, { keepFocus: true, noScroll: true, invalidateAll: true });
        return;
      }
      this.warning = reasonOf(result);
      announcer.say(this.warning);
      await update({ reset: false });
    };
  };

  /** Sends a verdict again that was not stored. */
  async sendAgain(verdict: UnstoredVerdict): Promise<void> {
    this.unstored = this.unstored.filter((other) => other !== verdict);
    try {
      const headers = { accept: 'application/json', 'x-sveltekit-action': 'true' };
      const response = await fetch(verdict.action, { method: 'POST', body: verdict.form, headers });
      await this.#settle(deserialize(await response.text()), verdict, '');
    } catch {
      this.#keep(verdict, 'The server could not be reached');
    }
  }

  async #settle(
    result: Parameters<typeof reasonOf>[0],
    sent: Omit<UnstoredVerdict, 'reason'>,
    next: string | null,
  ): Promise<void> {
    if (result.type !== 'redirect' && result.type !== 'success') return this.#keep(sent, reasonOf(result));
    // What the next page loaded ahead did not know of this verdict yet. Loading anew would cancel a move that is under
    // way, so moves end first.
    while (navigating.complete) await navigating.complete.catch(() => {});
    await invalidateAll();
    if (next === null) announcer.say('Stored.');
  }

  #keep(sent: Omit<UnstoredVerdict, 'reason'>, reason: string): void {
    this.unstored = [...this.unstored, { ...sent, reason }];
    announcer.say(`The verdict on ${sent.name} was not stored: ${reason}.`);
  }
}

function reasonOf(result: { type: string; data?: Record<string, unknown>; error?: unknown }): string {
  const refusal = result.data?.refusal as { what?: string; mend?: string } | undefined;
  const text = refusal
    ? [refusal.what, refusal.mend].filter(Boolean).join(' ')
    : ((result.error as { message?: string } | undefined)?.message ?? 'The server could not be reached');
  return text.replace(/\.$/, '');
}

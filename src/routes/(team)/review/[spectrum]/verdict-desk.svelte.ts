import { deserialize } from '$app/forms';
import { goto, invalidateAll } from '$app/navigation';
import { navigating } from '$app/state';
import type { SubmitFunction } from '@sveltejs/kit';
import { announcer } from '../../../announcer.svelte';
import type { LookClock } from './look-clock';
import type { ReviewState } from './review-state.svelte';
import { reasonOf, VerdictPost, type ActionAnswer, type UnstoredVerdict } from './verdict-post.svelte';

type Kind = Parameters<ReviewState['missing']>[0];

interface Context {
  review: ReviewState;
  name: string;
  /** The spectrum after this one, or null at the end of the queue. */
  next: string | null;
  /** Id of the person's last verdict as the page was loaded. */
  last: string | null;
  addressOf: (id: string) => string;
}

/** Later verdicts wait for an answer no longer than this. */
const ANSWER_TIMEOUT_MS = 30_000;

/**
 * Hands verdicts to the server while the next spectrum is already on the desk: the page moves on at once, and a verdict
 * that was not stored is said, kept and can be sent again.
 */
export class VerdictDesk {
  /** What the last key press lacked; shown until something changes. */
  warning = $state<string | null>(null);
  undoing = $state(false);
  /** How long the spectrum on the desk has been looked at. */
  clock: LookClock | null = null;
  #context: () => Context;
  #post = new VerdictPost(postForm);

  constructor(context: () => Context) {
    this.#context = context;
  }

  get unstored(): readonly UnstoredVerdict[] {
    return this.#post.unstored;
  }
  /** Whether something was sent and not yet answered. */
  get busy(): boolean {
    return this.#post.pending > 0 || this.undoing;
  }
  /** Whether there is a verdict to take back, on its way or kept here if not on the server. */
  get canUndo(): boolean {
    return !this.undoing && (this.#context().last !== null || this.#post.pending > 0 || this.unstored.length > 0);
  }

  submit: SubmitFunction = ({ formData, submitter, cancel, action }) => {
    // The form goes out in its turn, not now.
    cancel();
    const { review, name, next, addressOf } = this.#context();
    if (review.given) return;
    const kind = (submitter?.getAttribute('value') ?? 'candidate') as Kind;
    this.warning = review.missing(kind);
    if (this.warning) return announcer.say(this.warning);
    review.given = true;
    const seconds = this.clock?.seconds(performance.now()) ?? null;
    if (seconds !== null) formData.set('lookSeconds', seconds.toFixed(1));
    // Without it the answer names the verdict instead of the next page, which is on its way already.
    formData.delete('next');
    const said = kind === 'no redshift' ? 'no redshift' : `${review.redshift.toFixed(5)}, ${review.confidence}`;
    announcer.say(next ? `${said}, ${name}. Next spectrum.` : `${said}, ${name}. That was the last of this queue.`);
    const sending = this.#post.send({ spectrumId: review.id, name, action: action.toString(), form: formData });
    if (next) void goto(addressOf(next), { keepFocus: true, noScroll: true });
    void sending.then(async (kept) => {
      review.given = false;
      const stored = await this.#settle(kept);
      if (stored && next === null) announcer.say('Stored.');
    });
  };

  undo: SubmitFunction = ({ formData, cancel, action }) => {
    cancel();
    if (!this.canUndo) return;
    this.undoing = true;
    void this.#takeBack(action.toString(), formData).finally(() => (this.undoing = false));
  };

  /** Sends a verdict again that was not stored. */
  async sendAgain(verdict: UnstoredVerdict): Promise<void> {
    await this.#settle(await this.#post.sendAgain(verdict));
  }

  async #takeBack(action: string, form: FormData): Promise<void> {
    const undone = await this.#post.undo(action, form, () => this.#context().last);
    if (undone.dropped) return backTo(this.#context().addressOf(undone.dropped.spectrumId));
    if (undone.answer.location !== undefined) return backTo(undone.answer.location);
    this.warning = reasonOf(undone.answer);
    announcer.say(this.warning);
  }

  /** Says that a verdict is kept, or loads what its storing changed; returns whether it was stored. */
  async #settle(kept: UnstoredVerdict | null): Promise<boolean> {
    if (kept) {
      announcer.say(`The verdict on ${kept.name} was not stored: ${kept.reason}.`);
      return false;
    }
    // What the next page loaded ahead did not know of this verdict yet. Loading anew would cancel a move that is under
    // way, so moves end first.
    while (navigating.complete) await navigating.complete.catch(() => {});
    await invalidateAll();
    return true;
  }
}

async function backTo(address: string): Promise<void> {
  announcer.say('The last verdict is taken back.');
  await goto(address, { keepFocus: true, noScroll: true, invalidateAll: true });
}

async function postForm(action: string, body: FormData): Promise<ActionAnswer> {
  const headers = { accept: 'application/json', 'x-sveltekit-action': 'true' };
  const signal = AbortSignal.timeout(ANSWER_TIMEOUT_MS);
  try {
    const response = await fetch(action, { method: 'POST', body, headers, cache: 'no-store', signal });
    return deserialize(await response.text());
  } catch {
    const message = signal.aborted ? 'The server did not answer in time' : 'The server could not be reached';
    return { type: 'error', error: { message } };
  }
}

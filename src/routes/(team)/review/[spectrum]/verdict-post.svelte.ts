/** What the server answered to a form action. */
export interface ActionAnswer {
  type: string;
  data?: Record<string, unknown>;
  error?: unknown;
  location?: string;
}

/** Brings one form to the server; answers with type "error" where it could not, and never throws. */
export type Transport = (action: string, form: FormData) => Promise<ActionAnswer>;

/** A verdict on its way. */
export interface SentVerdict {
  spectrumId: string;
  name: string;
  action: string;
  form: FormData;
}

/** A verdict the server did not take, kept whole so that nothing of it is lost. */
export interface UnstoredVerdict extends SentVerdict {
  reason: string;
  /** Its number among all that were given. */
  place: number;
}

/** What came of an undo: a verdict that was never stored is taken out of those kept, without asking the server. */
export type Undone = { dropped: UnstoredVerdict } | { dropped: null; answer: ActionAnswer };

/**
 * Brings verdicts and undos to the server one after another in the order they were given, since the server takes for
 * the last verdict what was stored last. Nobody waits for it: whatever is handed over stands in line at once. One that
 * fails is kept and the line goes on, so an undo takes back the verdict given last even where that one was not stored.
 */
export class VerdictPost {
  unstored = $state.raw<UnstoredVerdict[]>([]);
  /** Verdicts handed over and not yet answered. */
  pending = $state(0);
  #transport: Transport;
  #line: Promise<unknown> = Promise.resolve();
  #places = 0;
  /** Places of the verdicts that were stored and not undone since, oldest first. */
  #stored: number[] = [];
  /** The id of the verdict stored last, until an undo: the page's own data may not know it yet. */
  #newest: string | null = null;

  constructor(transport: Transport) {
    this.#transport = transport;
  }

  /** Stores a verdict in its turn. Returns null, or the verdict as it is kept where the server did not take it. */
  async send(verdict: SentVerdict): Promise<UnstoredVerdict | null> {
    const place = ++this.#places;
    this.pending++;
    return this.#inTurn(async () => {
      const answer = await this.#transport(verdict.action, verdict.form);
      this.pending--;
      if (answer.type !== 'redirect' && answer.type !== 'success') {
        const kept = { ...verdict, place, reason: reasonOf(answer) };
        this.unstored = [...this.unstored, kept];
        return kept;
      }
      this.#stored.push(place);
      this.#newest = typeof answer.data?.verdictId === 'string' ? answer.data.verdictId : null;
      // An older one on the same spectrum would replace this one if it were sent again.
      this.unstored = this.unstored.filter((other) => other.spectrumId !== verdict.spectrumId);
      return null;
    });
  }

  /** Sends a kept verdict again, as the one given last. */
  async sendAgain(kept: UnstoredVerdict): Promise<UnstoredVerdict | null> {
    this.unstored = this.unstored.filter((other) => other !== kept);
    const { spectrumId, name, action, form } = kept;
    return this.send({ spectrumId, name, action, form });
  }

  /**
   * Takes back, in its turn, the verdict given last before it.
   *
   * @param lastOnPage id of the last verdict by the page's own data, read when the turn comes
   */
  async undo(action: string, form: FormData, lastOnPage: () => string | null): Promise<Undone> {
    return this.#inTurn(async () => {
      const unstored = this.unstored.at(-1);
      if (unstored && unstored.place > (this.#stored.at(-1) ?? 0)) {
        this.unstored = this.unstored.filter((other) => other !== unstored);
        return { dropped: unstored };
      }
      form.set('verdictId', this.#newest ?? lastOnPage() ?? '');
      const answer = await this.#transport(action, form);
      // Where the server could not be reached, the same verdict is still the one to take back.
      if (answer.type !== 'error') this.#newest = null;
      if (answer.type === 'redirect') this.#stored.pop();
      return { dropped: null, answer };
    });
  }

  #inTurn<T>(task: () => Promise<T>): Promise<T> {
    const done = this.#line.then(task);
    this.#line = done.catch(() => {});
    return done;
  }
}

/** Why the server did not take something, without the full stop. */
export function reasonOf(answer: ActionAnswer): string {
  const refusal = answer.data?.refusal as { what?: string; mend?: string } | undefined;
  const text = refusal
    ? [refusal.what, refusal.mend].filter(Boolean).join(' ')
    : ((answer.error as { message?: string } | undefined)?.message ?? 'The server could not be reached');
  return text.replace(/\.$/, '');
}

import { error, fail, redirect, type RequestEvent, type ServerLoadEvent } from '@sveltejs/kit';
import { answerRefusal, statusOf } from '$lib/api/problem-details';
import { Refusal } from '$lib/domain/refusal';
import type { Actor } from './permissions';

/** Who may reach a route at all; what they may do there is asked again, by object, in the use-case. */
export type Access = 'public' | 'signed-in' | 'admin';

type Marked<T> = T & { access: Access };

function mark<T extends object>(access: Access, guarded: T): Marked<T> {
  return Object.assign(guarded, { access });
}

function admit(access: Access, actor: Actor | null): void {
  if (access === 'public') return;
  if (!actor) throw new Refusal('not-signed-in', 'This needs a signed-in person or a bearer token.', 'Sign in first.');
  if (access === 'admin' && !actor.isAdmin) throw new Refusal('forbidden', 'This is for administrators.');
}

/** A `+server.ts` handler: refusals become RFC 9457 problem details. */
export function endpoint<E extends RequestEvent>(access: Access, handler: (event: E) => Response | Promise<Response>) {
  return mark(access, async (event: E): Promise<Response> => {
    try {
      admit(access, event.locals.actor);
      return await handler(event);
    } catch (thrown) {
      if (thrown instanceof Refusal) return answerRefusal(thrown, event.url.pathname);
      throw thrown;
    }
  });
}

/** A page's `load`: whoever must sign in is sent there and comes back; other refusals show the error page. */
export function guardedLoad<E extends ServerLoadEvent, R>(access: Access, load: (event: E) => R | Promise<R>) {
  return mark(access, async (event: E): Promise<R> => {
    try {
      admit(access, event.locals.actor);
      return await load(event);
    } catch (thrown) {
      if (!(thrown instanceof Refusal)) throw thrown;
      if (thrown.code === 'not-signed-in') {
        redirect(303, `/sign-in?next=${encodeURIComponent(event.url.pathname + event.url.search)}`);
      }
      error(statusOf(thrown.code), { message: thrown.message });
    }
  });
}

/** A form action: refusals come back to the form as `{ refusal }` with their status. */
export function guardedAction<E extends RequestEvent, R>(access: Access, action: (event: E) => R | Promise<R>) {
  return mark(access, async (event: E) => {
    try {
      admit(access, event.locals.actor);
      return await action(event);
    } catch (thrown) {
      if (!(thrown instanceof Refusal)) throw thrown;
      const { what, mend, where } = thrown;
      return fail(statusOf(thrown.code), { refusal: { what, mend, where } });
    }
  });
}

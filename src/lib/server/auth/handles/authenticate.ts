import type { Handle } from '@sveltejs/kit';
import { answerRefusal } from '$lib/api/problem-details';
import { Refusal } from '$lib/domain/refusal';
import { actorOf, actorOfToken } from '../actor';
import { readSession, sessionCookieName } from '../sessions';

const isForPrograms = (path: string): boolean => path.startsWith('/api/') || path.startsWith('/vo/');

/** Finds out who asks: a bearer token on the API, else the session cookie. A wrong token is refused, not ignored. */
export const authenticate: Handle = async ({ event, resolve }) => {
  event.locals.actor = null;
  event.locals.sessionId = null;
  const bearer = /^Bearer\s+(\S+)$/i.exec(event.request.headers.get('authorization') ?? '');
  if (bearer && isForPrograms(event.url.pathname)) {
    event.locals.actor = await actorOfToken(bearer[1]);
    if (!event.locals.actor) {
      const refusal = new Refusal('not-signed-in', 'This bearer token is not known or has run out.', 'Make a new one.');
      return answerRefusal(refusal, event.url.pathname);
    }
    return resolve(event);
  }
  const cookie = event.cookies.get(sessionCookieName());
  const session = cookie ? await readSession(cookie) : null;
  if (cookie && session) {
    event.locals.sessionId = cookie;
    event.locals.actor = await actorOf(session.userId);
    if (session.renewed) event.cookies.set(session.renewed.name, session.renewed.value, session.renewed.options);
  }
  return resolve(event);
};

import { randomUUID } from 'node:crypto';
import type { Handle, HandleServerError } from '@sveltejs/kit';
import { sequence } from '@sveltejs/kit/hooks';
import { building } from '$app/environment';
import { closeConnections } from '$lib/server/auth/close-connections';
import { authenticate } from '$lib/server/auth/handles/authenticate';
import { capBody } from '$lib/server/auth/handles/cap-body';
import { refuseCrossSite } from '$lib/server/auth/handles/refuse-cross-site';
import { endFollowing } from '$lib/server/ingest/follow-night';
import { log } from '$lib/server/log/log';

const THEMES = ['light', 'dark', 'dome'] as const;

if (!building) {
  // The server waits for open event streams before it closes: they end first, then the connections.
  for (const signal of ['SIGTERM', 'SIGINT'] as const) process.once(signal, endFollowing);
  process.once('sveltekit:shutdown', () => void closeConnections());
}

const headers: Handle = async ({ event, resolve }) => {
  event.locals.requestId = randomUUID();
  const response = await resolve(event);
  response.headers.set('x-content-type-options', 'nosniff');
  response.headers.set('referrer-policy', 'same-origin');
  response.headers.set('x-frame-options', 'DENY');
  response.headers.set('cross-origin-opener-policy', 'same-origin');
  if (event.locals.actor && !response.headers.has('cache-control'))
    response.headers.set('cache-control', 'private, no-cache');
  return response;
};

const theme: Handle = ({ event, resolve }) => {
  const wanted = event.cookies.get('farglow-theme');
  event.locals.theme = THEMES.find((name) => name === wanted) ?? 'light';
  return resolve(event, { transformPageChunk: ({ html }) => html.replace('%farglow.theme%', event.locals.theme) });
};

export const handle = sequence(headers, capBody, refuseCrossSite, authenticate, theme);

/** Unexpected faults: the person sees an id that stands in the log beside the cause. */
export const handleError: HandleServerError = ({ error, event, status, message }) => {
  if (status === 404) return { message: 'There is no such page.' };
  const id = event.locals.requestId ?? randomUUID();
  log.error({ id, path: event.url.pathname, err: error }, 'request failed');
  return { message: status < 500 ? message : 'Something went wrong on our side.', id };
};

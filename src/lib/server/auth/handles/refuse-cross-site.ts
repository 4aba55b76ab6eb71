import type { Handle } from '@sveltejs/kit';
import { answerRefusal } from '$lib/api/problem-details';
import { Refusal } from '$lib/domain/refusal';
import { config } from '../../config/config';

const READS = new Set(['GET', 'HEAD', 'OPTIONS']);

/**
 * Refuses a write that carries a cookie but no Origin of ours. A write with a bearer token ignores cookies, so it
 * needs no Origin: `curl -F` works.
 */
export const refuseCrossSite: Handle = ({ event, resolve }) => {
  const { request, url } = event;
  const byToken = request.headers.has('authorization') && /^\/(api|vo)\//.test(url.pathname);
  const writes = !READS.has(request.method);
  if (writes && !byToken && request.headers.get('origin') !== new URL(config().ORIGIN).origin) {
    // Writes without any cookie on the API have nobody to borrow from: the guard answers 401 for them.
    if (request.headers.has('cookie') || !url.pathname.startsWith('/api/')) {
      return answerRefusal(
        new Refusal(
          'forbidden',
          `A write must come from ${config().ORIGIN}.`,
          'Open Farglow at that address, or use a bearer token.',
        ),
        url.pathname,
      );
    }
  }
  return resolve(event);
};

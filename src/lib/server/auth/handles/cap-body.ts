import type { Handle } from '@sveltejs/kit';
import { answerRefusal } from '$lib/api/problem-details';
import { Refusal } from '$lib/domain/refusal';

/** Ordinary bodies; spectra come through routes that stream and count for themselves. */
const ORDINARY_BODY_BYTES = 1024 * 1024;
/** Target lists: 100,000 rows of a VOTable. */
const LIST_BODY_BYTES = 24 * 1024 * 1024;
const LISTS = /^\/targets$|^\/api\/v1\/programmes\/[^/]+\/target-lists$/;
const STREAMED = /^\/api\/v1\/nights\/[^/]+\/(files|uploads(\/[^/]+)?)$/;

/** Refuses bodies over 1 MiB (24 MiB for a target list), and bodies of undeclared length, everywhere but on the upload routes. */
export const capBody: Handle = async ({ event, resolve }) => {
  const { request, url } = event;
  if (!request.body) return resolve(event);
  if (STREAMED.test(url.pathname)) {
    const response = await resolve(event);
    // What is refused may be unread: the rest of it would be taken for the next request on this connection.
    if (response.status >= 400) response.headers.set('connection', 'close');
    return response;
  }
  const declared = request.headers.get('content-length');
  const most = LISTS.test(url.pathname) && event.request.method === 'POST' ? LIST_BODY_BYTES : ORDINARY_BODY_BYTES;
  if (declared !== null && Number(declared) <= most) return resolve(event);
  const answer = answerRefusal(
    new Refusal(
      'too-large',
      `A body here may have at most ${most / 2 ** 20} MiB, and its length must be declared.`,
      'Send less.',
    ),
    url.pathname,
  );
  // The body is never read, so the connection can't carry another request.
  answer.headers.set('connection', 'close');
  return answer;
};

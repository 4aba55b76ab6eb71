import { endpoint } from '$lib/server/auth/guards';
import { followNight } from '$lib/server/ingest/follow-night';
import type { RequestEvent } from './$types';

/** Server-sent events: each is a whole snapshot of the night, its id the night's revision. */
export const GET = endpoint('signed-in', async ({ params, locals, request }: RequestEvent) => {
  const stream = await followNight(locals.actor!, params.night, request.signal);
  return new Response(stream, {
    headers: { 'content-type': 'text/event-stream', 'cache-control': 'no-store', 'x-accel-buffering': 'no' },
  });
});

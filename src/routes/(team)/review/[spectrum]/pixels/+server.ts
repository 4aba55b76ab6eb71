import { endpoint } from '$lib/server/auth/guards';
import { readPixels } from '$lib/server/review/read-pixels';
import type { RequestEvent } from './$types';

export const GET = endpoint('signed-in', async ({ params, locals }: RequestEvent) => {
  const bytes = await readPixels(locals.actor, params.spectrum);
  // Held briefly, so that a spectrum loaded ahead is not fetched again when it is reached.
  return new Response(bytes, {
    headers: { 'content-type': 'application/octet-stream', 'cache-control': 'private, max-age=300' },
  });
});

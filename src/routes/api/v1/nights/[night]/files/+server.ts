import { endpoint } from '$lib/server/auth/guards';
import { receiveUpload } from '$lib/server/ingest/receive-upload';
import type { RequestEvent } from './$types';

/** Files as multipart/form-data, any number of parts, streamed to storage: `curl -F file=@a.fits -F file=@b.fits`. */
export const POST = endpoint('signed-in', async ({ params, locals, request }: RequestEvent) => {
  return Response.json(await receiveUpload(locals.actor, params.night, request), { status: 202 });
});

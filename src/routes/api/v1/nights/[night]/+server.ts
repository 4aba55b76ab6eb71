import { endpoint } from '$lib/server/auth/guards';
import { readNight } from '$lib/server/ingest/read-night';
import type { RequestEvent } from './$types';

export const GET = endpoint('signed-in', async ({ params, locals, request }: RequestEvent) => {
  const night = await readNight(locals.actor, params.night);
  const etag = `"${night.revision}-${night.files.total}"`;
  const headers = { etag, 'cache-control': 'private, no-cache' };
  if (request.headers.get('if-none-match') === etag) return new Response(null, { status: 304, headers });
  return Response.json(night, { headers });
});

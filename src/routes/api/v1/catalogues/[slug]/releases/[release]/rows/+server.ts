import { endpoint } from '$lib/server/auth/guards';
import { parseRowQuery } from '$lib/server/query/parse-row-query';
import { serveRows } from '$lib/server/query/serve-rows';
import type { RequestEvent } from './$types';

export const GET = endpoint('public', async ({ params, url, request }: RequestEvent) => {
  const { body, status, headers } = await serveRows(params.slug, params.release, parseRowQuery(url.searchParams), {
    accept: request.headers.get('accept'),
    ifNoneMatch: request.headers.get('if-none-match'),
  });
  return new Response(body, { status, headers });
});

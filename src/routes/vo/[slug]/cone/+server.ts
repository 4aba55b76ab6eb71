import { endpoint } from '$lib/server/auth/guards';
import { coneSearch } from '$lib/server/query/cone-search';
import type { RequestEvent } from './$types';

export const GET = endpoint('public', async ({ params, url }: RequestEvent) => {
  const { status, body } = await coneSearch(params.slug, url.searchParams);
  // A release is never changed, but the latest may be another one tomorrow.
  return new Response(body, { status, headers: { 'content-type': 'text/xml', 'cache-control': 'no-cache' } });
});

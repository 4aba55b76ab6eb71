import { endpoint } from '$lib/server/auth/guards';
import { readCatalogue } from '$lib/server/query/read-catalogue';
import type { RequestEvent } from './$types';

export const GET = endpoint('public', async ({ params, locals }: RequestEvent) =>
  Response.json(await readCatalogue(locals.actor, params.slug), { headers: { 'cache-control': 'no-cache' } }),
);

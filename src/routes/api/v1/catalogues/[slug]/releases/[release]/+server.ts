import { endpoint } from '$lib/server/auth/guards';
import { readRelease } from '$lib/server/query/read-release';
import type { RequestEvent } from './$types';

export const GET = endpoint('public', async ({ params }: RequestEvent) =>
  Response.json(await readRelease(params.slug, params.release), { headers: { 'cache-control': 'no-cache' } }),
);

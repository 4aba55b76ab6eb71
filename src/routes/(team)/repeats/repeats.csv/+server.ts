import { parseQuery } from '$lib/api/parse';
import { endpoint } from '$lib/server/auth/guards';
import { repeatsCsv, repeatsSchema } from '$lib/server/review/read-repeats';
import type { RequestEvent } from './$types';

export const GET = endpoint('signed-in', async ({ locals, url }: RequestEvent) => {
  const { name, csv } = await repeatsCsv(locals.actor, parseQuery(url, repeatsSchema));
  return new Response(csv, {
    headers: { 'content-type': 'text/csv; charset=utf-8', 'content-disposition': `attachment; filename="${name}"` },
  });
});

import { parseQuery } from '$lib/api/parse';
import { guardedLoad } from '$lib/server/auth/guards';
import { readRepeats, repeatsSchema } from '$lib/server/review/read-repeats';
import type { PageServerLoadEvent } from './$types';

export const load = guardedLoad('signed-in', async ({ locals, url }: PageServerLoadEvent) => ({
  repeats: await readRepeats(locals.actor, parseQuery(url, repeatsSchema)),
}));

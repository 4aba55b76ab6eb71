import { guardedLoad } from '$lib/server/auth/guards';
import { readTarget } from '$lib/server/review/read-target';
import type { PageServerLoadEvent } from './$types';

export const load = guardedLoad('signed-in', async ({ locals, params }: PageServerLoadEvent) => ({
  target: await readTarget(locals.actor, params.target),
}));

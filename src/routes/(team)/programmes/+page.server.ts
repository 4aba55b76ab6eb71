import { guardedLoad } from '$lib/server/auth/guards';
import { listProgrammes } from '$lib/server/programmes/list-programmes';
import type { PageServerLoadEvent } from './$types';

export const load = guardedLoad('signed-in', async ({ locals }: PageServerLoadEvent) => ({
  programmes: await listProgrammes(locals.actor),
}));

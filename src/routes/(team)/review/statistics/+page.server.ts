import { guardedLoad } from '$lib/server/auth/guards';
import { readStatistics } from '$lib/server/review/read-statistics';
import type { PageServerLoadEvent } from './$types';

export const load = guardedLoad('signed-in', async ({ locals }: PageServerLoadEvent) => ({
  programmes: await readStatistics(locals.actor),
}));

import { guardedLoad } from '$lib/server/auth/guards';
import { readNight } from '$lib/server/ingest/read-night';
import type { PageServerLoadEvent } from './$types';

/** The night as it stands; rows and every change after this come through the API. */
export const load = guardedLoad('signed-in', async ({ locals, params }: PageServerLoadEvent) => ({
  night: await readNight(locals.actor, params.night),
}));

import { guardedLoad } from '$lib/server/auth/guards';
import { readReport } from '$lib/server/ingest/read-report';
import type { PageServerLoadEvent } from './$types';

export const load = guardedLoad('signed-in', async ({ locals, params }: PageServerLoadEvent) => ({
  report: await readReport(locals.actor, params.night, Date.now()),
  madeAt: new Date().toISOString(),
}));

import { guardedLoad } from '$lib/server/auth/guards';
import { listInstruments } from '$lib/server/ingest/read-instrument';
import type { PageServerLoadEvent } from './$types';

export const load = guardedLoad('signed-in', ({ locals }: PageServerLoadEvent) => listInstruments(locals.actor));

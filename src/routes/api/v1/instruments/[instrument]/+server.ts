import { endpoint } from '$lib/server/auth/guards';
import { readInstrument } from '$lib/server/ingest/read-instrument';
import type { RequestEvent } from './$types';

export const GET = endpoint('signed-in', async ({ params, locals }: RequestEvent) =>
  Response.json(await readInstrument(locals.actor, params.instrument)),
);

import { parseQuery } from '$lib/api/parse';
import { endpoint } from '$lib/server/auth/guards';
import { listMeasurements, listMeasurementsSchema } from '$lib/server/ingest/list-measurements';
import type { RequestEvent } from './$types';

export const GET = endpoint('signed-in', async ({ params, locals, url }: RequestEvent) =>
  Response.json(await listMeasurements(locals.actor, params.night, parseQuery(url, listMeasurementsSchema))),
);

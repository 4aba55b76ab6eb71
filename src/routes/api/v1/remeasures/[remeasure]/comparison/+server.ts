import { parseQuery } from '$lib/api/parse';
import { comparisonPageSchema } from '$lib/domain/comparison';
import { endpoint } from '$lib/server/auth/guards';
import { compareMeasurements } from '$lib/server/review/compare-measurements';
import type { RequestEvent } from './$types';

export const GET = endpoint('signed-in', async ({ params, locals, url }: RequestEvent) =>
  Response.json(await compareMeasurements(locals.actor, params.remeasure, parseQuery(url, comparisonPageSchema))),
);

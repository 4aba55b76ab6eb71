import { endpoint } from '$lib/server/auth/guards';
import { cancelRemeasure } from '$lib/server/measure/cancel-remeasure';
import { readRemeasure } from '$lib/server/measure/read-remeasure';
import type { RequestEvent } from './$types';

export const GET = endpoint('signed-in', async ({ params, locals }: RequestEvent) =>
  Response.json(await readRemeasure(locals.actor, params.remeasure)),
);

/** Cancels it: what was measured stays. */
export const DELETE = endpoint('signed-in', async ({ params, locals }: RequestEvent) => {
  await cancelRemeasure(locals.actor, params.remeasure);
  return new Response(null, { status: 204 });
});

import { parseBody } from '$lib/api/parse';
import { remeasureRequestSchema } from '$lib/domain/remeasure';
import { endpoint } from '$lib/server/auth/guards';
import { listRemeasures } from '$lib/server/measure/read-remeasure';
import { startRemeasure } from '$lib/server/measure/start-remeasure';

export const GET = endpoint('signed-in', async ({ locals }) =>
  Response.json({ remeasures: await listRemeasures(locals.actor) }),
);

export const POST = endpoint('signed-in', async ({ request, locals }) => {
  const { id } = await startRemeasure(locals.actor, await parseBody(request, remeasureRequestSchema));
  const headers = { location: `/api/v1/remeasures/${id}` };
  return Response.json({ id, url: `/review/compare/${id}` }, { status: 202, headers });
});

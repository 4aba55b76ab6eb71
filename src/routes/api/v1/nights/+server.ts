import { parseBody } from '$lib/api/parse';
import { endpoint } from '$lib/server/auth/guards';
import { createNight, createNightSchema } from '$lib/server/ingest/create-night';
import { listNights } from '$lib/server/ingest/list-nights';

export const GET = endpoint('signed-in', async ({ locals }) =>
  Response.json({ nights: await listNights(locals.actor) }),
);

export const POST = endpoint('signed-in', async ({ request, locals }) => {
  const { id } = await createNight(locals.actor, await parseBody(request, createNightSchema));
  return Response.json({ id, url: `/nights/${id}` }, { status: 201, headers: { location: `/api/v1/nights/${id}` } });
});

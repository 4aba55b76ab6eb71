import { parseBody } from '$lib/api/parse';
import { instrumentSaveSchema } from '$lib/domain/instrument-view';
import { endpoint } from '$lib/server/auth/guards';
import { listInstruments } from '$lib/server/ingest/read-instrument';
import { saveInstrument } from '$lib/server/ingest/save-instrument';

export const GET = endpoint('signed-in', async ({ locals }) => {
  const { instruments } = await listInstruments(locals.actor);
  return Response.json({ instruments });
});

export const POST = endpoint('signed-in', async ({ request, locals }) => {
  const saved = await saveInstrument(locals.actor, await parseBody(request, instrumentSaveSchema));
  const headers = { location: `/api/v1/instruments/${saved.id}` };
  return Response.json(saved, { status: saved.isNew ? 201 : 200, headers });
});

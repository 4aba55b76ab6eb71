import { parseBody } from '$lib/api/parse';
import { assignmentSchema } from '$lib/domain/instrument';
import { endpoint } from '$lib/server/auth/guards';
import { tryAssignment } from '$lib/server/ingest/try-assignment';
import type { RequestEvent } from './$types';

export const POST = endpoint('signed-in', async ({ params, locals, request }: RequestEvent) =>
  Response.json(await tryAssignment(locals.actor, params.file, await parseBody(request, assignmentSchema))),
);

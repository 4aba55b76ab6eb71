import { parse, parseBody } from '$lib/api/parse';
import { announcementSchema, withdrawalSchema } from '$lib/domain/upload';
import { endpoint } from '$lib/server/auth/guards';
import { announceFiles, withdrawFiles } from '$lib/server/ingest/announce-files';
import type { RequestEvent } from './$types';

/** Which files are about to be sent; answers which need not be. */
export const POST = endpoint('signed-in', async ({ params, locals, request }: RequestEvent) => {
  const announcement = await parseBody(request, announcementSchema);
  return Response.json({ files: await announceFiles(locals.actor, params.night, announcement) });
});

/** Which of them will not be sent after all; without a body, none. */
export const DELETE = endpoint('signed-in', async ({ params, locals, request }: RequestEvent) => {
  const { paths } = request.body ? await parseBody(request, withdrawalSchema) : parse(withdrawalSchema, {}, 'The body');
  return Response.json({ withdrawn: await withdrawFiles(locals.actor, params.night, paths) });
});

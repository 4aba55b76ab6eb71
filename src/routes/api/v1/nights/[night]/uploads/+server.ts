import { parseOpening } from '$lib/api/upload-headers';
import { endpoint } from '$lib/server/auth/guards';
import { appendUpload } from '$lib/server/ingest/append-upload';
import { largestUpload } from '$lib/server/ingest/largest-upload';
import { openUpload } from '$lib/server/ingest/open-upload';
import { listUploads } from '$lib/server/ingest/own-upload';
import { receivedBytes } from '$lib/server/ingest/received-bytes';
import { uploadHeaders } from './answer-upload';
import type { RequestEvent } from './$types';

export const GET = endpoint('signed-in', async ({ params, locals }: RequestEvent) =>
  Response.json({ uploads: await listUploads(locals.actor, params.night) }),
);

/** Opens an upload that can be gone on with after a break; a body is its first bytes. */
export const POST = endpoint('signed-in', async ({ params, locals, request }: RequestEvent) => {
  const opened = await openUpload(locals.actor, params.night, parseOpening(request.headers));
  // Bytes of a body begin at the first; where the upload was open already it stands elsewhere, and HEAD tells where.
  const upload =
    request.body && opened.receivedBytes === 0
      ? await appendUpload(locals.actor, params.night, opened.id, 0, receivedBytes(request.body))
      : opened;
  const location = `/api/v1/nights/${params.night}/uploads/${upload.id}`;
  return Response.json(upload, { status: 201, headers: { location, ...uploadHeaders(upload, largestUpload()) } });
});

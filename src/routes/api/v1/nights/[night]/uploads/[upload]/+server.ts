import { parseAppending } from '$lib/api/upload-headers';
import { Refusal } from '$lib/domain/refusal';
import { endpoint } from '$lib/server/auth/guards';
import { appendUpload } from '$lib/server/ingest/append-upload';
import { cancelUpload } from '$lib/server/ingest/cancel-upload';
import { largestUpload } from '$lib/server/ingest/largest-upload';
import { readUpload } from '$lib/server/ingest/own-upload';
import { receivedBytes } from '$lib/server/ingest/received-bytes';
import { refuseWithOffset, uploadHeaders } from '../answer-upload';
import type { RequestEvent } from './$types';

/** Where the upload stands, and what became of it. */
export const GET = endpoint('signed-in', async ({ params, locals }: RequestEvent) => {
  const upload = await readUpload(locals.actor, params.night, params.upload);
  return Response.json(upload, { headers: uploadHeaders(upload, largestUpload()) });
});

export const HEAD = endpoint('signed-in', async ({ params, locals }: RequestEvent) => {
  const upload = await readUpload(locals.actor, params.night, params.upload);
  return new Response(null, { status: 204, headers: uploadHeaders(upload, largestUpload()) });
});

/** Bytes from an offset on, in chunks or all that is left: what came before a break stays. */
export const PATCH = endpoint('signed-in', async ({ params, locals, request, url }: RequestEvent) => {
  const { offset, isLast } = parseAppending(request.headers);
  const { actor } = locals;
  try {
    if (!request.body) throw new Refusal('invalid', 'The body is empty.', 'Send bytes from Upload-Offset on.', 'body');
    const upload = await appendUpload(actor, params.night, params.upload, offset, receivedBytes(request.body));
    if (isLast && upload.state === 'open') {
      const what = `The upload was called complete at ${upload.receivedBytes} of ${upload.sizeBytes} bytes.`;
      throw new Refusal('invalid', what, 'Send the rest.', 'Upload-Complete');
    }
    return Response.json(upload, {
      status: upload.state === 'open' ? 200 : 202,
      headers: uploadHeaders(upload, largestUpload()),
    });
  } catch (thrown) {
    return refuseWithOffset(thrown, url.pathname, () => readUpload(actor, params.night, params.upload));
  }
});

/** Gives the upload up. */
export const DELETE = endpoint('signed-in', async ({ params, locals }: RequestEvent) => {
  await cancelUpload(locals.actor, params.night, params.upload);
  return new Response(null, { status: 204 });
});

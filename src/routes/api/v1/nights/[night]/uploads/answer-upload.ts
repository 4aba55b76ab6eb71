import { answerRefusal } from '$lib/api/problem-details';
import { Refusal } from '$lib/domain/refusal';
import type { UploadState } from '$lib/domain/upload';

/** Header fields of where an upload stands, by draft-ietf-httpbis-resumable-upload. */
export function uploadHeaders(upload: UploadState, largestBytes: number): Record<string, string> {
  return {
    'upload-offset': String(upload.receivedBytes),
    'upload-complete': upload.state === 'open' ? '?0' : '?1',
    'upload-length': String(upload.sizeBytes),
    'upload-limit': `max-size=${largestBytes}`,
    'cache-control': 'no-store',
  };
}

/** The refusal with where the upload stands now, so that a client needs no second question; any other error is thrown. */
export async function refuseWithOffset(
  thrown: unknown,
  instance: string,
  stands: () => Promise<UploadState>,
): Promise<Response> {
  if (!(thrown instanceof Refusal) || !['conflict', 'invalid'].includes(thrown.code)) throw thrown;
  const response = answerRefusal(thrown, instance);
  const upload = await stands().catch(() => null);
  if (upload) response.headers.set('upload-offset', String(upload.receivedBytes));
  return response;
}

import { CHUNK_BYTES, uploadStateSchema, type UploadState } from '$lib/domain/upload';
import type { BatchResult } from './send-batch';

/** Another request may still hold the upload, as after a reload: it lets go when it has been silent for a while. */
const WAIT_FOR_OTHER_MS = 3_000;
const WAITS_FOR_OTHER = 8;

interface LargeFile {
  file: File;
  name: string;
  sha256: string | null;
}

/** An answer to one request: a status of 0 stands for a connection that broke. */
interface Answer {
  status: number;
  body: unknown;
  offset: number | null;
}

/**
 * Sends one large file chunk by chunk, going on where an earlier try left it: the server knows it again by its digest.
 * @param onSent bytes of the file that the server has or that are on their way
 */
export async function sendChunks(
  nightId: string,
  large: LargeFile,
  signal: AbortSignal,
  onSent: (bytes: number) => void,
): Promise<BatchResult> {
  const { file, name, sha256 } = large;
  const opened = await ask(`/api/v1/nights/${nightId}/uploads`, {
    method: 'POST',
    headers: {
      'upload-complete': '?0',
      'upload-length': String(file.size),
      'content-disposition': `attachment; filename*=UTF-8''${encodeURIComponent(name)}`,
      ...(sha256 && { 'repr-digest': `sha-256=:${base64(sha256)}:` }),
    },
    signal,
  });
  let upload = stateOf(opened);
  if (!upload) return failed(opened, signal);
  const address = `/api/v1/nights/${nightId}/uploads/${upload.id}`;
  let waits = 0;
  while (upload.state === 'open') {
    const offset = upload.receivedBytes;
    onSent(offset);
    const chunk = file.slice(offset, offset + CHUNK_BYTES);
    const answer = await patch(address, chunk, offset, offset + chunk.size === file.size, signal, (bytes) =>
      onSent(offset + bytes),
    );
    const next = stateOf(answer);
    if (next) {
      upload = next;
      waits = 0;
    } else if (answer.status === 409 && waits < WAITS_FOR_OTHER && !signal.aborted) {
      // Where it stands elsewhere, go on there; where another request writes, wait for it to end.
      if (answer.offset === offset || answer.offset === null) {
        waits++;
        await new Promise((resolve) => setTimeout(resolve, WAIT_FOR_OTHER_MS));
      }
      const now = stateOf(await ask(address, { signal }));
      if (!now) return { kind: 'broken', what: 'The connection broke.' };
      upload = now;
    } else return failed(answer, signal);
  }
  if (upload.state === 'failed') {
    return { kind: 'refused', status: 422, what: 'It could not be unpacked.', mend: 'See the problems of the night.' };
  }
  const { file: taken } = upload;
  return {
    kind: 'answered',
    answer: {
      files: taken ? [{ name, already: taken.already }] : [],
      refused: [],
      archives: taken ? [] : [{ name }],
    },
  };
}

function stateOf({ status, body }: Answer): UploadState | null {
  if (status < 200 || status > 299) return null;
  const state = uploadStateSchema.safeParse(body);
  return state.success ? state.data : null;
}

function failed({ status, body }: Answer, signal: AbortSignal): BatchResult {
  if (signal.aborted) return { kind: 'cancelled' };
  if (status < 400 || status >= 500 || [408, 409, 425, 429].includes(status)) {
    return { kind: 'broken', what: status ? `The server answered with status ${status}.` : 'The connection broke.' };
  }
  const { detail, mend } = (body ?? {}) as { detail?: string; mend?: string };
  return { kind: 'refused', status, what: detail ?? `The server refused with status ${status}.`, mend: mend ?? '' };
}

async function ask(address: string, init: RequestInit): Promise<Answer> {
  try {
    const response = await fetch(address, init);
    const body: unknown = await response.json().catch(() => null);
    return { status: response.status, body, offset: null };
  } catch {
    return { status: 0, body: null, offset: null };
  }
}

/** XMLHttpRequest, since fetch doesn't tell how much has gone out. */
function patch(
  address: string,
  chunk: Blob,
  offset: number,
  isLast: boolean,
  signal: AbortSignal,
  onSent: (bytes: number) => void,
): Promise<Answer> {
  return new Promise((resolve) => {
    const request = new XMLHttpRequest();
    const abort = () => request.abort();
    const end = () => {
      signal.removeEventListener('abort', abort);
      const told = request.getResponseHeader('upload-offset');
      let body: unknown = null;
      try {
        body = JSON.parse(request.responseText);
      } catch {
        // an answer that is no JSON says nothing more than its status
      }
      resolve({ status: request.status, body, offset: told === null ? null : Number(told) });
    };
    signal.addEventListener('abort', abort);
    request.upload.onprogress = ({ loaded }) => onSent(Math.min(loaded, chunk.size));
    request.onload = request.onerror = request.onabort = end;
    request.open('PATCH', address);
    request.setRequestHeader('content-type', 'application/partial-upload');
    request.setRequestHeader('upload-offset', String(offset));
    request.setRequestHeader('upload-complete', isLast ? '?1' : '?0');
    request.send(chunk);
    if (signal.aborted) abort();
  });
}

function base64(hex: string): string {
  const bytes = hex.match(/../g)!.map((pair) => parseInt(pair, 16));
  return btoa(String.fromCharCode(...bytes));
}

import { uploadAnswerSchema, type UploadAnswer } from './match-answer';

export type BatchResult =
  | { kind: 'answered'; answer: UploadAnswer }
  /** Refused as a whole, with the server's words. */
  | { kind: 'refused'; status: number; what: string; mend: string }
  /** No answer, or none that can be trusted: worth another try. */
  | { kind: 'broken'; what: string }
  | { kind: 'cancelled' };

/**
 * Sends files to a night in one multipart request. XMLHttpRequest, since fetch doesn't tell how much has gone out.
 * @param onSent bytes of file content sent so far
 */
export function sendBatch(
  nightId: string,
  files: { file: File; name: string }[],
  signal: AbortSignal,
  onSent: (bytes: number) => void,
): Promise<BatchResult> {
  return new Promise((resolve) => {
    const form = new FormData();
    for (const { file, name } of files) form.append('file', file, name);
    const request = new XMLHttpRequest();
    const abort = () => request.abort();
    const end = (result: BatchResult) => {
      signal.removeEventListener('abort', abort);
      resolve(result);
    };
    signal.addEventListener('abort', abort);
    request.upload.onprogress = ({ loaded, total }) => {
      // The parts' heads count too; the share of the whole is what matters.
      const content = files.reduce((sum, { file }) => sum + file.size, 0);
      onSent(total > 0 ? (content * loaded) / total : 0);
    };
    request.onload = () => end(read(request));
    request.onerror = () => end({ kind: 'broken', what: 'The connection broke.' });
    request.onabort = () => end({ kind: 'cancelled' });
    request.open('POST', `/api/v1/nights/${nightId}/files`);
    request.send(form);
    if (signal.aborted) abort();
  });
}

function read(request: XMLHttpRequest): BatchResult {
  const body = json(request.responseText);
  if (request.status === 202) {
    const answer = uploadAnswerSchema.safeParse(body);
    if (answer.success) return { kind: 'answered', answer: answer.data };
  }
  if (request.status >= 400 && request.status < 500 && ![408, 425, 429].includes(request.status)) {
    const { detail, mend } = (body ?? {}) as { detail?: string; mend?: string };
    const what = detail ?? `The server refused with status ${request.status}.`;
    return { kind: 'refused', status: request.status, what, mend: mend ?? '' };
  }
  return { kind: 'broken', what: `The server answered with status ${request.status}.` };
}

function json(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return null;
  }
}

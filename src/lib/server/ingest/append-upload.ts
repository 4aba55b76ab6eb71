import { randomUUID } from 'node:crypto';
import { Refusal } from '$lib/domain/refusal';
import type { UploadState } from '$lib/domain/upload';
import type { Actor } from '../auth/permissions';
import { endWriting, findUpload, noteReceived, takeWriting } from '../database/queries/uploads';
import { staging } from '../storage/staging';
import { finishUpload } from './finish-upload';
import { describeUpload, ownUpload } from './own-upload';

/** While bytes are checked at the end, the writer says so this often. */
const STILL_HERE_MS = 5_000;

/**
 * Takes bytes that begin at `offset`, as far as they come: what arrived before a connection broke stays. With the last
 * of them the upload is checked and becomes a file of the night, or an archive to be unpacked.
 *
 * Refuses with `conflict` where the upload is at another offset, or someone is writing to it now.
 */
export async function appendUpload(
  actor: Actor | null,
  nightId: string,
  uploadId: string,
  offset: number,
  body: AsyncIterable<Uint8Array>,
): Promise<UploadState> {
  const { night, upload } = await ownUpload(actor, nightId, uploadId);
  const { id, sizeBytes } = upload;
  const writer = randomUUID();
  if (!(await takeWriting(id, writer, offset))) throw await explain(id, offset);
  let reached = offset;
  const note = async (now: number) => {
    reached = now;
    if (await noteReceived(id, writer, now)) return;
    throw new Refusal('conflict', 'Another request goes on with this upload.', 'Ask where it stands, and go on there.');
  };
  const alive = setInterval(() => void noteReceived(id, writer, reached).catch(() => {}), STILL_HERE_MS);
  try {
    reached = await staging().write(id, offset, body, sizeBytes, note);
    if (reached === sizeBytes) await finishUpload(night, { ...upload, receivedBytes: reached }, () => note(0));
  } finally {
    clearInterval(alive);
    await endWriting(id, writer);
  }
  const stands = await findUpload(id);
  if (!stands) throw new Refusal('not-found', 'This upload was given up meanwhile.', 'Open one with POST.');
  return describeUpload(stands);
}

async function explain(id: string, offset: number): Promise<Refusal> {
  const now = await findUpload(id);
  if (!now || now.state !== 'open') {
    return new Refusal('conflict', 'This upload is complete.', 'Ask what became of it with GET.', 'Upload-Complete');
  }
  if (now.receivedBytes !== offset) {
    const what = `The upload holds ${now.receivedBytes} bytes, and these begin at ${offset}.`;
    return new Refusal('conflict', what, `Go on at ${now.receivedBytes}.`, 'Upload-Offset');
  }
  return new Refusal('conflict', 'Another request is writing to this upload.', 'Wait a few seconds and try again.');
}

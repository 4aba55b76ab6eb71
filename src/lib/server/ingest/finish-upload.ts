import { createHash } from 'node:crypto';
import { archiveKind, HEAD_BYTES } from '$lib/formats/archive/archive-kind';
import { Refusal } from '$lib/domain/refusal';
import { config } from '../config/config';
import { removeUpload, settleAsFile, type UploadRow } from '../database/queries/uploads';
import { objects } from '../storage/storage';
import { staging } from '../storage/staging';
import { addToNight, type NightAdmitted } from './receive-file';
import { FOREIGN_ARCHIVE, queueArchive } from './queue-archive';

/**
 * Checks an upload whose bytes are all here, and hands it on: as a file of the night, or as an archive to unpack.
 * Called by the one writer of it. Bytes that are not those announced are thrown away and the upload begins anew.
 *
 * @param beginAnew sets the upload back to its first byte
 */
export async function finishUpload(
  night: NightAdmitted,
  upload: UploadRow,
  beginAnew: () => Promise<void>,
): Promise<void> {
  const { id, name, sizeBytes } = upload;
  const { sha256, head } = await digestStaged(id);
  if (upload.sha256 !== null && upload.sha256 !== sha256) {
    await staging().remove(id);
    await beginAnew();
    throw new Refusal(
      'invalid',
      `The bytes of ${name} that came have the SHA-256 ${sha256}; announced was ${upload.sha256}.`,
      'It changed on the way or while it was sent: send it again from its first byte.',
      'Repr-Digest',
    );
  }
  const kind = archiveKind(head);
  if (kind === 'foreign') return refuse(id, new Refusal('unsupported', FOREIGN_ARCHIVE.what, FOREIGN_ARCHIVE.mend));
  if (kind) return queueArchive(night, { id, kind, sha256, sizeBytes });
  if (sizeBytes > config().MAX_FILE_BYTES) {
    const limit = Math.floor(config().MAX_FILE_BYTES / 1024 / 1024);
    const what = `${name} is no archive, and larger than the ${limit} MiB allowed for a file.`;
    return refuse(id, new Refusal('too-large', what, 'Split it, or ask an administrator to raise MAX_FILE_BYTES.'));
  }
  await objects().adopt(staging().path(id), sha256);
  const [file] = await addToNight(night, [{ name, sha256, sizeBytes }]);
  await settleAsFile(id, file);
}

async function refuse(id: string, refusal: Refusal): Promise<never> {
  await staging().remove(id);
  await removeUpload(id);
  throw refusal;
}

async function digestStaged(id: string): Promise<{ sha256: string; head: Uint8Array }> {
  const hash = createHash('sha256');
  let head: Uint8Array | undefined;
  for await (const chunk of staging().read(id)) {
    head ??= chunk.subarray(0, HEAD_BYTES);
    hash.update(chunk);
  }
  return { sha256: hash.digest('hex'), head: head ?? new Uint8Array(0) };
}

import { Refusal } from '$lib/domain/refusal';
import type { UploadState } from '$lib/domain/upload';
import type { Actor } from '../auth/permissions';
import { insertUpload, openUploadsOf } from '../database/queries/uploads';
import { refuseSize } from './largest-upload';
import { describeUpload } from './own-upload';
import { admitToNight, cleanName } from './receive-file';

/** More that wait for bytes than this are a program gone wrong. */
const OPEN_AT_ONCE = 100;

/**
 * Opens an upload in chunks. Where the same person has one open for the same bytes, that one: what came is kept, and a
 * file dropped again goes on where it was.
 */
export async function openUpload(
  actor: Actor | null,
  nightId: string,
  file: { name: string; sizeBytes: number; sha256: string | null },
): Promise<UploadState> {
  const night = await admitToNight(actor, nightId);
  const name = cleanName(file.name);
  const refusal = refuseSize(name, file.sizeBytes);
  if (refusal) throw refusal;
  const userId = actor!.userId;
  const open = await openUploadsOf(night.id, userId);
  const same = open.find(
    ({ sha256, sizeBytes }) => sha256 !== null && sha256 === file.sha256 && sizeBytes === file.sizeBytes,
  );
  if (same) return describeUpload(same);
  if (open.length >= OPEN_AT_ONCE) {
    throw new Refusal(
      'too-many',
      `${OPEN_AT_ONCE} uploads to this night wait for their bytes.`,
      'Go on with one of them, or cancel it with DELETE.',
    );
  }
  return describeUpload(
    await insertUpload({ nightId: night.id, userId, name, sizeBytes: file.sizeBytes, sha256: file.sha256 }),
  );
}

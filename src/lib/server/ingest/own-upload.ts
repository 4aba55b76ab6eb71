import { Refusal } from '$lib/domain/refusal';
import type { UploadState } from '$lib/domain/upload';
import type { Actor } from '../auth/permissions';
import { findUpload, openUploadsOf, type UploadRow } from '../database/queries/uploads';
import { admitToNight, type NightAdmitted } from './receive-file';

/** An upload of the actor's own to a night they may submit to. Another person's is refused: nobody goes on with it. */
export async function ownUpload(
  actor: Actor | null,
  nightId: string,
  uploadId: string,
): Promise<{ night: NightAdmitted; upload: UploadRow }> {
  const night = await admitToNight(actor, nightId);
  const upload = await findUpload(uploadId);
  if (!upload || upload.nightId !== night.id) {
    throw new Refusal('not-found', 'There is no such upload, or its time is over.', 'Open one with POST.');
  }
  if (upload.userId !== actor!.userId) {
    throw new Refusal('forbidden', 'This upload is another person’s.', 'Open one of your own.');
  }
  return { night, upload };
}

/** An upload as its owner sees it. */
export function describeUpload(row: UploadRow): UploadState {
  const { id, name, sizeBytes, receivedBytes, state, fileId, sha256, already, unpacked } = row;
  const file = fileId && sha256 ? { id: fileId, sha256, already } : null;
  return { id, name, sizeBytes, receivedBytes, state, file, unpacked };
}

/** Where one upload stands. */
export async function readUpload(actor: Actor | null, nightId: string, uploadId: string): Promise<UploadState> {
  return describeUpload((await ownUpload(actor, nightId, uploadId)).upload);
}

/** The actor's uploads to a night that wait for bytes. */
export async function listUploads(actor: Actor | null, nightId: string): Promise<UploadState[]> {
  const night = await admitToNight(actor, nightId);
  return (await openUploadsOf(night.id, actor!.userId)).map(describeUpload);
}

import type { Actor } from '../auth/permissions';
import { Refusal } from '$lib/domain/refusal';
import { removeUpload } from '../database/queries/uploads';
import { staging } from '../storage/staging';
import { ownUpload } from './own-upload';

/** Throws away an upload that is not complete, with what came of it. */
export async function cancelUpload(actor: Actor | null, nightId: string, uploadId: string): Promise<void> {
  const { upload } = await ownUpload(actor, nightId, uploadId);
  if (upload.state !== 'open') {
    throw new Refusal('conflict', 'This upload is complete.', 'Its file is in the night and stays there.');
  }
  await removeUpload(upload.id);
  await staging().remove(upload.id);
}

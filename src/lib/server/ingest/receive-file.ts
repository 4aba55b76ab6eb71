import type { Readable } from 'node:stream';
import { Refusal } from '$lib/domain/refusal';
import { permit, type Actor } from '../auth/permissions';
import { config } from '../config/config';
import { inTransaction } from '../database/in-transaction';
import { addFileToNight, findNight } from '../database/queries/nights';
import { nudge } from '../queue/nudge';
import { wishFor } from '../queue/outbox';
import { objects } from '../storage/storage';

export interface ReceivedFile {
  id: string;
  name: string;
  sha256: string;
  sizeBytes: number;
  /** True where the same bytes were already in this night. */
  already: boolean;
}

/** A name for people: no folders, no control characters, at most 255 characters. */
function cleanName(name: string): string {
  const last = name.split(/[\\/]/).pop() ?? '';
  return last.replace(/[\u0000-\u001f\u007f]/g, '').slice(-255) || 'unnamed';
}

/** Refuses unless the actor may submit to the night; returns what the files need to know of it. */
export async function admitToNight(
  actor: Actor | null,
  nightId: string,
): Promise<{ id: string; programmeId: string; instrumentId: string | null }> {
  const night = await findNight(nightId);
  if (!night) throw new Refusal('not-found', 'There is no such night.', 'See Nights for those there are.');
  permit(actor, 'night.submit', night.programmeId);
  return night;
}

/**
 * Takes one file into a night: bytes to storage, then the row and the wish for its ingest job in one transaction.
 * Bytes the programme already has are linked to the night and not read again.
 */
export async function receiveFile(
  actor: Actor | null,
  nightId: string,
  file: { name: string; stream: Readable },
): Promise<ReceivedFile> {
  const night = await admitToNight(actor, nightId);
  const name = cleanName(file.name);
  const { sha256, sizeBytes } = await objects().put(file.stream, config().MAX_FILE_BYTES);
  if (sizeBytes === 0) throw new Refusal('invalid', `${name} is empty.`, 'Check that it was written whole.', name);
  const received = await inTransaction(async (transaction) => {
    const added = await addFileToNight({ night, name, sha256, sizeBytes }, transaction);
    if (added.isNew)
      await wishFor('ingest', [{ jobId: `ingest-${added.id}`, payload: { fileId: added.id } }], transaction);
    return added;
  });
  nudge('outbox');
  nudge('nights', nightId);
  return { id: received.id, name, sha256, sizeBytes, already: received.already };
}

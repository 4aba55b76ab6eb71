import type { Readable } from 'node:stream';
import { Refusal } from '$lib/domain/refusal';
import { permit, type Actor } from '../auth/permissions';
import { config } from '../config/config';
import { inTransaction } from '../database/in-transaction';
import { removeExpected } from '../database/queries/expected-files';
import { addFilesToNight, findNight } from '../database/queries/nights';
import { nudge } from '../queue/nudge';
import { wishFor } from '../queue/outbox';
import { objects } from '../storage/storage';

/** Files read by one job: enough to write their rows together, few enough that progress is seen. */
const FILES_PER_JOB = 12;

export interface NightAdmitted {
  id: string;
  programmeId: string;
  instrumentId: string | null;
}

/** Bytes that are safe in storage and not in a night yet. */
export interface StoredBytes {
  name: string;
  sha256: string;
  sizeBytes: number;
}

export interface ReceivedFile extends StoredBytes {
  id: string;
  /** True where the same bytes were already in this night. */
  already: boolean;
}

/** A name for people: no folders, no control characters, at most 255 characters. */
export function cleanName(name: string): string {
  const last = name.split(/[\\/]/).pop() ?? '';
  return last.replace(/[\u0000-\u001f\u007f]/g, '').slice(-255) || 'unnamed';
}

/** Refuses unless the actor may submit to the night; returns what the files need to know of it. */
export async function admitToNight(actor: Actor | null, nightId: string): Promise<NightAdmitted> {
  const night = await findNight(nightId);
  if (!night) throw new Refusal('not-found', 'There is no such night.', 'See Nights for those there are.');
  permit(actor, 'night.submit', night.programmeId);
  return night;
}

/** Streams one file to storage; an empty one is refused. Called for a night that `admitToNight` let in. */
export async function storeBytes(file: {
  name: string;
  stream: Readable | AsyncIterable<Uint8Array>;
}): Promise<StoredBytes> {
  const name = cleanName(file.name);
  const { sha256, sizeBytes } = await objects().put(file.stream, config().MAX_FILE_BYTES);
  if (sizeBytes === 0) throw new Refusal('invalid', `${name} is empty.`, 'Check that it was written whole.', name);
  return { name, sha256, sizeBytes };
}

/**
 * Takes stored bytes into a night: rows and the wishes for their ingest jobs in one transaction. Bytes the programme
 * already has are linked to the night and not read again.
 */
export async function addToNight(night: NightAdmitted, stored: StoredBytes[]): Promise<ReceivedFile[]> {
  if (stored.length === 0) return [];
  const added = await inTransaction(async (transaction) => {
    const files = await addFilesToNight(night, stored, transaction);
    await removeExpected(night.id, { sha256: stored.map(({ sha256 }) => sha256) }, transaction);
    const fresh = files.filter(({ isNew }) => isNew).map(({ id }) => id);
    const wishes = [];
    for (let i = 0; i < fresh.length; i += FILES_PER_JOB) {
      const fileIds = fresh.slice(i, i + FILES_PER_JOB);
      wishes.push({ jobId: `ingest-${fileIds[0]}-${fileIds.length}`, payload: { fileIds } });
    }
    await wishFor('ingest', wishes, transaction);
    return files;
  });
  nudge('outbox');
  nudge('nights', night.id);
  return stored.map((bytes, i) => ({ ...bytes, id: added[i].id, already: added[i].already }));
}

/** Takes one file into a night. */
export async function receiveFile(
  actor: Actor | null,
  nightId: string,
  file: { name: string; stream: Readable },
): Promise<ReceivedFile> {
  const night = await admitToNight(actor, nightId);
  const [received] = await addToNight(night, [await storeBytes(file)]);
  return received;
}

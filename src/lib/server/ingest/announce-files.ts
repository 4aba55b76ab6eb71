import type { Announced, Announcement } from '$lib/domain/upload';
import type { Actor } from '../auth/permissions';
import { inTransaction } from '../database/in-transaction';
import { insertExpected, removeExpected } from '../database/queries/expected-files';
import { knownDigests } from '../database/queries/known-digests';
import { holdNight, touchNights } from '../database/queries/nights';
import { archivesHere } from '../database/queries/uploads';
import { nudge } from '../queue/nudge';
import { refuseSize } from './largest-upload';
import { addToNight, admitToNight, cleanName } from './receive-file';

/**
 * Is told which files are about to be sent, and says which need not be: bytes that the programme has are put into the
 * night at once. The others are written down as expected until they come, so that a night left half-submitted shows.
 */
export async function announceFiles(
  actor: Actor | null,
  nightId: string,
  { files }: Announcement,
): Promise<Announced['files']> {
  const night = await admitToNight(actor, nightId);
  const digests = files.flatMap(({ sha256 }) => sha256 ?? []);
  const [known, archives] = await Promise.all([
    knownDigests(night.programmeId, digests),
    archivesHere(night.id, digests),
  ]);
  const answers = files.map(({ path, sizeBytes, sha256 }): Announced['files'][number] => {
    if (sha256 && (known.has(sha256) || archives.has(sha256))) return { path, state: 'here' };
    const refusal = refuseSize(cleanName(path), sizeBytes);
    return refusal ? { path, state: 'refused', what: refusal.what, mend: refusal.mend } : { path, state: 'expected' };
  });
  const stored = files.flatMap(({ path: name, sizeBytes, sha256 }) =>
    sha256 && known.has(sha256) ? [{ name, sizeBytes, sha256 }] : [],
  );
  await addToNight(night, stored);
  const pathsOf = (wanted: (state: string) => boolean) =>
    files.filter((_, i) => wanted(answers[i].state)).map(({ path }) => path);
  const expected = new Set(pathsOf((state) => state === 'expected'));
  await inTransaction(async (transaction) => {
    await holdNight(night.id, transaction);
    await removeExpected(night.id, { paths: pathsOf((state) => state !== 'expected') }, transaction);
    await insertExpected(
      night.id,
      actor!.userId,
      files
        .filter(({ path }) => expected.has(path))
        .map(({ path, sizeBytes, sha256 }) => ({ path, sizeBytes, sha256: sha256 ?? null })),
      transaction,
    );
    await touchNights([night.id], transaction);
  });
  nudge('nights', night.id);
  return answers;
}

/** Is told that files will not be sent after all; without paths, none of the night's. Returns how many were expected. */
export async function withdrawFiles(actor: Actor | null, nightId: string, paths?: string[]): Promise<number> {
  const night = await admitToNight(actor, nightId);
  const withdrawn = await inTransaction(async (transaction) => {
    const count = await removeExpected(night.id, { paths }, transaction);
    await touchNights([night.id], transaction);
    return count;
  });
  nudge('nights', night.id);
  return withdrawn;
}

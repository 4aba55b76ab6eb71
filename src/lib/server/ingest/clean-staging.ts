import { removeStaleExpected } from '../database/queries/expected-files';
import { neededUploads, removeUpload, staleUploads } from '../database/queries/uploads';
import { staging } from '../storage/staging';

/** An upload that nobody has gone on with for a week is given up; so is what was announced a fortnight ago. */
const UPLOAD_DAYS = 7;
const EXPECTED_DAYS = 14;
/** Staged bytes without an upload: a process died between the two. Younger ones may be in the making. */
const ORPHAN_MS = 3_600_000;

/** Worker use-case, run every hour: throws away what was begun and left. Returns how many uploads it gave up. */
export async function cleanStaging(now: Date): Promise<number> {
  const stale = await staleUploads(UPLOAD_DAYS);
  for (const id of stale) {
    await removeUpload(id);
    await staging().remove(id);
  }
  const old = (await staging().list()).filter(({ changedMs }) => now.getTime() - changedMs > ORPHAN_MS);
  const needed = await neededUploads(old.map(({ id }) => id));
  for (const { id } of old) if (!needed.has(id)) await staging().remove(id);
  await removeStaleExpected(EXPECTED_DAYS);
  return stale.length;
}

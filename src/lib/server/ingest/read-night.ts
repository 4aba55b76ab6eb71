import type { NightSnapshot } from '$lib/domain/night';
import { Refusal } from '$lib/domain/refusal';
import { permit, may, type Actor } from '../auth/permissions';
import { findNight } from '../database/queries/nights';
import { missingOfNight } from '../database/queries/expected-files';
import { countNight, nightProblems, programmeOfNight, sameNames } from '../database/queries/night-snapshot';
import { archivesOfNight } from '../database/queries/uploads';

/** Everything the night page shows besides rows, at one revision: counts by state and confidence, problems. */
export async function readNight(actor: Actor | null, nightId: string): Promise<NightSnapshot> {
  const night = await findNight(nightId);
  if (!night) throw new Refusal('not-found', 'There is no such night, or it belongs to a programme you are not in.');
  permit(actor, 'night.read', night.programmeId);
  // The revision is read before the counts: a snapshot may be newer than its number, never older.
  const { id, civilDate, notes, revision, programmeId } = night;
  const [counts, problems, namesakes, programme, missing, archives] = await Promise.all([
    countNight(id),
    nightProblems(id),
    sameNames(id),
    programmeOfNight(programmeId),
    missingOfNight(id),
    archivesOfNight(id),
  ]);
  return {
    id,
    civilDate,
    notes,
    revision: Number(revision),
    programme,
    ...counts,
    missing,
    archives,
    done:
      counts.files.waiting === 0 &&
      counts.spectra.waiting === 0 &&
      archives.every(({ state }) => state !== 'unpacking'),
    problems: [...problems, ...namesakes],
    maySubmit: may(actor, 'night.submit', programmeId),
    mayJudge: may(actor, 'spectrum.judge', programmeId),
  };
}

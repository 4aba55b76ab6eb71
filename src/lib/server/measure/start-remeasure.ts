import type { RemeasureRequest } from '$lib/domain/remeasure';
import { Refusal } from '$lib/domain/refusal';
import { recordEvent } from '../audit/record-event';
import { permit, type Actor } from '../auth/permissions';
import { permitSelf } from '../auth/permit-self';
import { inTransaction, type Transaction } from '../database/in-transaction';
import { findNight, findProgramme } from '../database/queries/nights';
import { allProgrammeIds } from '../database/queries/programmes';
import {
  endIfDone,
  insertRemeasure,
  instrumentsInScope,
  isRemeasureRunning,
  moveToNewestInstruments,
  takeSpectra,
  waitingSpectra,
  type RemeasureScope,
} from '../database/queries/remeasures';
import { nudge } from '../queue/nudge';
import { wishFor } from '../queue/outbox';
import { remeasureJobId } from './remeasure-spectra';
import { currentEngine } from './settings-hash';

/** Spectra of one job: as many as a job of a stack's first measuring. */
const SPECTRA_PER_JOB = 16;
/** Wishes written by one statement: some 700 bytes each, well under the server's packet size. */
const WISHES_AT_ONCE = 1_000;

async function scopeOf({ night, programme }: Pick<RemeasureRequest, 'night' | 'programme'>): Promise<RemeasureScope> {
  if (night !== undefined) {
    const found = await findNight(night);
    if (!found) throw new Refusal('not-found', 'There is no such night, or it belongs to a programme you are not in.');
    return { programmeId: found.programmeId, nightId: found.id };
  }
  const found = await findProgramme(programme ?? '');
  if (!found) throw new Refusal('not-found', 'There is no such programme, or you are not in it.');
  return { programmeId: found.id, nightId: null };
}

async function start(scope: RemeasureScope, reason: string, userId: string, transaction: Transaction): Promise<string> {
  const engineVersion = currentEngine().version;
  const id = await insertRemeasure({ ...scope, reason, engineVersion, createdBy: userId }, transaction);
  await moveToNewestInstruments(scope, transaction);
  for (const { instrumentId, instrument } of await instrumentsInScope(scope, transaction)) {
    const { settings: settingsHash } = currentEngine(instrument);
    await takeSpectra(id, scope, { instrumentId, engineVersion, settingsHash }, transaction);
  }
  const waiting = await waitingSpectra(id, transaction);
  const wishes = [];
  for (let i = 0; i < waiting.length; i += SPECTRA_PER_JOB) {
    const spectrumIds = waiting.slice(i, i + SPECTRA_PER_JOB);
    wishes.push({ jobId: remeasureJobId(id, spectrumIds), payload: { remeasureId: id, spectrumIds } });
  }
  for (let i = 0; i < wishes.length; i += WISHES_AT_ONCE) {
    await wishFor('remeasure', wishes.slice(i, i + WISHES_AT_ONCE), transaction);
  }
  await endIfDone(id, transaction);
  const subject = `remeasure:${id}`;
  const detail = { ...scope, waiting: waiting.length };
  await recordEvent({ userId, action: 'measurement.repeat', subject, detail }, transaction);
  return id;
}

/**
 * Measures a night or a programme again by the engine and the newest versions of its instruments. Older measurements
 * stay, and stay current until people accept the new ones; spectra that the same engine and settings measured already
 * are skipped.
 */
export async function startRemeasure(actor: Actor | null, request: RemeasureRequest): Promise<{ id: string }> {
  const scope = await scopeOf(request);
  const { userId } = permit(actor, 'measurement.repeat', scope.programmeId);
  const id = await inTransaction(async (transaction) => {
    if (await isRemeasureRunning(scope.programmeId, transaction)) {
      throw new Refusal(
        'conflict',
        'This programme is being measured again already.',
        'Wait until that is done, or cancel it.',
      );
    }
    return start(scope, request.reason, userId, transaction);
  });
  nudge('outbox');
  return { id };
}

/** Measures everything again, one re-measure a programme; programmes with one under way are left to it. For administrators. */
export async function remeasureEverything(
  actor: Actor | null,
  reason: string,
): Promise<{ started: number; underWay: number }> {
  const { userId, isAdmin } = permitSelf(actor);
  if (!isAdmin) throw new Refusal('forbidden', 'Everything is measured again by administrators.', 'Ask one.');
  let started = 0;
  const programmeIds = await allProgrammeIds();
  for (const programmeId of programmeIds) {
    await inTransaction(async (transaction) => {
      if (await isRemeasureRunning(programmeId, transaction)) return;
      await start({ programmeId, nightId: null }, reason, userId, transaction);
      started++;
    });
  }
  nudge('outbox');
  return { started, underWay: programmeIds.length - started };
}

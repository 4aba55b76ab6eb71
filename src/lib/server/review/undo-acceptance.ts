import { Refusal } from '$lib/domain/refusal';
import { recordEvent } from '../audit/record-event';
import { permit, type Actor } from '../auth/permissions';
import { inTransaction } from '../database/in-transaction';
import { appendAcceptance, changesOf, findAcceptance, isUndone } from '../database/queries/acceptances';
import { touchNightsOfFiles } from '../database/queries/nights';
import { nudge } from '../queue/nudge';

/**
 * Takes an acceptance back: each spectrum gets back the measurement it had, unless another was accepted for it since.
 * Appends a row; nothing is erased.
 */
export async function undoAcceptance(
  actor: Actor | null,
  acceptanceId: string,
): Promise<{ restored: number; changedSince: number }> {
  const found = await findAcceptance(acceptanceId);
  if (!found || found.undoes) throw new Refusal('not-found', 'There is no such acceptance to take back.');
  const { userId } = permit(actor, 'measurement.accept', found.programmeId);
  const done = await inTransaction(async (transaction) => {
    if (await isUndone(acceptanceId, transaction)) {
      throw new Refusal('conflict', 'It was taken back already.', 'Load the page again.');
    }
    const changes = await changesOf(acceptanceId, transaction);
    const still = changes.filter(({ currentId, toId }) => currentId === toId);
    const back = still.map(({ spectrumId, fromId, toId }) => ({ spectrumId, fromId: toId, toId: fromId }));
    const { remeasureId } = found;
    await appendAcceptance({ remeasureId, userId, filter: {}, undoes: acceptanceId }, back, transaction);
    const subject = `acceptance:${acceptanceId}`;
    await recordEvent({ userId, action: 'measurement.undo', subject, detail: { spectra: back.length } }, transaction);
    const nights = await touchNightsOfFiles([...new Set(still.map(({ fileId }) => fileId))], transaction);
    return { nights, restored: back.length, changedSince: changes.length - back.length };
  });
  for (const nightId of done.nights) nudge('nights', nightId);
  return { restored: done.restored, changedSince: done.changedSince };
}

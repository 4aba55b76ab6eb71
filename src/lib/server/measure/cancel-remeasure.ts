import { Refusal } from '$lib/domain/refusal';
import { recordEvent } from '../audit/record-event';
import { permit, type Actor } from '../auth/permissions';
import { inTransaction } from '../database/in-transaction';
import { cancelRunning } from '../database/queries/remeasures';
import { findRemeasure } from './read-remeasure';

/** Stops a re-measure: what waits is left, what was measured stays and can be compared. */
export async function cancelRemeasure(actor: Actor | null, id: string): Promise<void> {
  const { programme } = await findRemeasure(id);
  const { userId } = permit(actor, 'measurement.repeat', programme.id);
  await inTransaction(async (transaction) => {
    if (!(await cancelRunning(id, transaction)))
      throw new Refusal('conflict', 'It has ended already.', 'Load the page again.');
    await recordEvent({ userId, action: 'measurement.cancel', subject: `remeasure:${id}` }, transaction);
  });
}

import { inTransaction } from '../database/in-transaction';
import { peopleToTell, putInLetter } from '../database/queries/mentions';
import { mailIsConfigured } from '../mail/deliver';
import { postLetter } from '../mail/post-letter';
import { nudge } from '../queue/nudge';

/** Noon UTC: by then nights have ended at every observatory but those of the far Pacific. */
const FROM_HOUR_UTC = 12;

/**
 * Worker use-case, run every minute. From noon UTC on posts everyone who was mentioned, and wants it, one letter about all
 * that no letter told them of; a person and a day have one, however many workers look and whenever they start again.
 * Returns how many were posted.
 */
export async function postDigests(now: Date): Promise<number> {
  if (!mailIsConfigured() || now.getUTCHours() < FROM_HOUR_UTC) return 0;
  const day = now.toISOString().slice(0, 10);
  let posted = 0;
  for (const userId of await peopleToTell(day)) {
    const isNew = await inTransaction(async (transaction) => {
      const letterId = await postLetter({ kind: 'mention digest', userId, day }, transaction);
      if (letterId) await putInLetter(userId, letterId, transaction);
      return letterId !== null;
    });
    if (isNew) posted++;
  }
  if (posted) nudge('outbox');
  return posted;
}

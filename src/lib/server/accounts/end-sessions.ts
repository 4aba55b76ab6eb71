import { recordEvent } from '../audit/record-event';
import type { Actor } from '../auth/permissions';
import { permitSelf } from '../auth/permit-self';
import { hashSecret } from '../auth/secrets';
import { inTransaction } from '../database/in-transaction';
import { deleteSessions } from '../database/queries/account';

/** Ends a session of the person by its stored id, or, without one, all but the present; returns how many ended. */
export async function endSessions(actor: Actor | null, sessionId: string, id: string | null): Promise<number> {
  const { userId } = permitSelf(actor);
  return inTransaction(async (transaction) => {
    const which = id === null ? { allBut: hashSecret(sessionId) } : { id };
    const ended = await deleteSessions(userId, which, transaction);
    if (ended) {
      await recordEvent({ userId, action: 'session.end', subject: `user:${userId}`, detail: { ended } }, transaction);
    }
    return ended;
  });
}

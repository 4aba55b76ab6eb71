import { z } from 'zod';
import { Refusal } from '$lib/domain/refusal';
import { recordEvent } from '../audit/record-event';
import { verifyPassword } from '../auth/passwords';
import { endSession, startSession, type SessionCookie } from '../auth/sessions';
import { countSignIn, forgiveSignIn } from '../auth/throttle';
import { config } from '../config/config';
import { database } from '../database/connection';
import { inTransaction } from '../database/in-transaction';
import { User } from '../database/queries/people';

export const signInSchema = z.object({ email: z.email().max(254), password: z.string().min(1).max(1024) });

/**
 * Public use-case. Starts a session for an e-mail and password; the one before it in this browser ends.
 * The same words and the same time whether the account is missing or the password wrong.
 */
export async function signIn(
  input: z.output<typeof signInSchema>,
  network: string,
  sessionBefore: string | null,
): Promise<SessionCookie> {
  await countSignIn(input.email, network);
  database();
  const user = await User.findOne({ where: { email: input.email } });
  const right = await verifyPassword(user?.passwordHash ?? null, input.password);
  // Demo passwords are printed on a terminal and kept in a folder: they open nothing from beyond this machine.
  const refusedDemo = user?.isDemo && !['127.0.0.1', 'localhost', '::1'].includes(config().HOST);
  if (!user || !right || refusedDemo) {
    throw new Refusal('not-signed-in', 'E-mail and password do not belong together.', 'Check both and try again.');
  }
  await forgiveSignIn(input.email, network);
  if (sessionBefore) await endSession(sessionBefore);
  await inTransaction((transaction) =>
    recordEvent({ userId: user.id, action: 'session.start', subject: `user:${user.id}` }, transaction),
  );
  return startSession(user.id);
}

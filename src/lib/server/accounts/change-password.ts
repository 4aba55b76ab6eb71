import { z } from 'zod';
import { Refusal } from '$lib/domain/refusal';
import { recordEvent } from '../audit/record-event';
import { hashPassword, PASSWORD_MIN_LENGTH, verifyPassword } from '../auth/passwords';
import type { Actor } from '../auth/permissions';
import { permitSelf } from '../auth/permit-self';
import { hashSecret } from '../auth/secrets';
import { countSignIn, forgiveSignIn } from '../auth/throttle';
import { inTransaction } from '../database/in-transaction';
import { deleteSessions } from '../database/queries/account';
import { User } from '../database/queries/people';

export const passwordSchema = z.object({
  current: z.string().min(1, 'write your present password').max(1024),
  password: z.string().min(PASSWORD_MIN_LENGTH, `a password has at least ${PASSWORD_MIN_LENGTH} characters`).max(1024),
});

/**
 * Changes the person's password after the present one, counted as a try to sign in; every other session ends, since
 * whoever had the old password may have one.
 */
export async function changePassword(
  actor: Actor | null,
  input: z.output<typeof passwordSchema>,
  network: string,
  sessionId: string,
): Promise<{ ended: number }> {
  const { userId, email } = permitSelf(actor);
  const user = await User.findByPk(userId, { rejectOnEmpty: true });
  if (user.isDemo) {
    throw new Refusal(
      'forbidden',
      'Demo accounts keep the password that was printed.',
      'Try it with an account of yours.',
    );
  }
  await countSignIn(email, network);
  if (!(await verifyPassword(user.passwordHash, input.current))) {
    throw new Refusal('invalid', 'This is not your present password.', 'Write it again.', 'current');
  }
  await forgiveSignIn(email, network);
  const passwordHash = await hashPassword(input.password);
  return inTransaction(async (transaction) => {
    await User.update({ passwordHash }, { where: { id: userId }, transaction });
    const ended = await deleteSessions(userId, { allBut: hashSecret(sessionId) }, transaction);
    await recordEvent(
      { userId, action: 'account.password', subject: `user:${userId}`, detail: { ended } },
      transaction,
    );
    return { ended };
  });
}

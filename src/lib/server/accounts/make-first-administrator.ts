import { z } from 'zod';
import { Refusal } from '$lib/domain/refusal';
import { recordEvent } from '../audit/record-event';
import { hashPassword, PASSWORD_MIN_LENGTH } from '../auth/passwords';
import { hashSecret, newSecret } from '../auth/secrets';
import { database } from '../database/connection';
import { inTransaction } from '../database/in-transaction';
import { useInvitation } from '../database/queries/invitations';
import { Invitation, User } from '../database/queries/people';
import { findInvitation } from './find-invitation';

const HOURS = 48;

/** Operator use-case. A one-time secret that makes the first administrator; null once there is one. */
export async function inviteFirstAdministrator(): Promise<string | null> {
  database();
  if (await User.count({ where: { isAdmin: true } })) return null;
  const secret = newSecret('fgi');
  const expiresAt = new Date(Date.now() + HOURS * 3600_000);
  await Invitation.destroy({ where: { makesAdmin: true, usedAt: null as never } });
  await Invitation.create({ tokenHash: hashSecret(secret), makesAdmin: true, expiresAt, usedAt: null } as never);
  return secret;
}

export const newAccountSchema = z.object({
  name: z.string().trim().min(1, 'give your name').max(200),
  email: z.email('give an e-mail address').max(254),
  password: z.string().min(PASSWORD_MIN_LENGTH, `a password has at least ${PASSWORD_MIN_LENGTH} characters`).max(1024),
});

/**
 * Public use-case: the secret is the permission. Makes the account, with what the invitation gives: the programme's roles,
 * or the administrator's. An invitation to a programme fixes the e-mail: it was sent there.
 */
export async function acceptInvitation(
  secret: string,
  input: z.output<typeof newAccountSchema>,
): Promise<{ userId: string }> {
  await findInvitation(secret);
  const passwordHash = await hashPassword(input.password);
  return inTransaction(async (transaction) => {
    const invitation = await findInvitation(secret, transaction);
    const email = invitation.email ?? input.email;
    if (await User.count({ where: { email }, transaction })) {
      throw new Refusal('conflict', 'This e-mail has an account already.', 'Sign in with it.', 'email');
    }
    const { makesAdmin: isAdmin } = invitation;
    const user = await User.create({ name: input.name, email, passwordHash, isAdmin } as never, { transaction });
    await useInvitation(invitation, user.id, transaction);
    const subject = `user:${user.id}`;
    const detail = { invitation: invitation.id };
    await recordEvent({ userId: user.id, action: 'account.make', subject, detail }, transaction);
    return { userId: user.id };
  });
}

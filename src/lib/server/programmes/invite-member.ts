import { z } from 'zod';
import { Refusal } from '$lib/domain/refusal';
import { recordEvent } from '../audit/record-event';
import { permit, ROLES, type Actor } from '../auth/permissions';
import { permitSelf } from '../auth/permit-self';
import { hashSecret, newSecret } from '../auth/secrets';
import { config } from '../config/config';
import { inTransaction } from '../database/in-transaction';
import { countWaiting, rolesOfEmail, withdrawInvitations } from '../database/queries/invitations';
import { Invitation } from '../database/queries/people';
import { mailIsConfigured } from '../mail/deliver';
import { postLetter } from '../mail/post-letter';
import { nudge } from '../queue/nudge';

const DAY_MS = 86_400_000;
export const INVITATION_DAYS = 14;
/** A programme invites its people, not the world: a stolen session sends no more letters than this. */
const MOST_WAITING = 100;

export const invitationSchema = z.object({
  programme: z.uuid('name a programme'),
  email: z.email('give an e-mail address').max(254),
  roles: z.array(z.enum(ROLES)).min(1, 'choose at least one role'),
});

/**
 * Invites an e-mail address to a programme with roles. By mail where this installation sends any; else the link comes
 * back once, to be handed over. Inviting an address again takes its earlier invitation back.
 */
export async function inviteMember(
  actor: Actor | null,
  { programme: programmeId, email, roles }: z.output<typeof invitationSchema>,
): Promise<{ link: string | null }> {
  const { userId } = permit(permitSelf(actor), 'programme.invite', programmeId);
  const held = await rolesOfEmail(programmeId, email);
  if (roles.every((role) => held.includes(role))) {
    throw new Refusal('conflict', `${email} has ${roles.join(', ')} already.`, 'Choose another role.', 'email');
  }
  const byMail = mailIsConfigured();
  // With mail the secret of the letter is made as it is sent; this one is never told to anyone.
  const secret = newSecret('fgi');
  await inTransaction(async (transaction) => {
    await withdrawInvitations({ programmeId, email }, transaction);
    if ((await countWaiting(programmeId, transaction)) >= MOST_WAITING) {
      throw new Refusal('conflict', `${MOST_WAITING} invitations wait already.`, 'Take some back first.');
    }
    const expiresAt = new Date(Date.now() + INVITATION_DAYS * DAY_MS);
    const about = { email, programmeId, roles, invitedBy: userId, createdAt: new Date(), expiresAt };
    const row = { tokenHash: hashSecret(secret), makesAdmin: false, usedAt: null, ...about };
    const { id } = await Invitation.create(row as never, { transaction });
    if (byMail) await postLetter({ kind: 'invitation', invitationId: id }, transaction);
    const subject = `programme:${programmeId}`;
    await recordEvent({ userId, action: 'member.invite', subject, detail: { email, roles } }, transaction);
  });
  if (byMail) nudge('outbox');
  return { link: byMail ? null : `${config().ORIGIN}/welcome/${secret}` };
}

import { Refusal } from '$lib/domain/refusal';
import { recordEvent } from '../audit/record-event';
import type { Actor } from '../auth/permissions';
import { permitSelf } from '../auth/permit-self';
import { inTransaction } from '../database/in-transaction';
import { useInvitation } from '../database/queries/invitations';
import { findInvitation } from './find-invitation';

/** Accepts an invitation to a programme with the account of whoever is signed in, whatever its e-mail. */
export async function joinProgramme(actor: Actor | null, secret: string): Promise<void> {
  const { userId } = permitSelf(actor);
  await inTransaction(async (transaction) => {
    const invitation = await findInvitation(secret, transaction);
    if (!invitation.programmeId) {
      throw new Refusal('invalid', 'This link makes a new account.', 'Sign out, then open it again.');
    }
    await useInvitation(invitation, userId, transaction);
    const subject = `programme:${invitation.programmeId}`;
    const detail = { invitation: invitation.id };
    await recordEvent({ userId, action: 'member.join', subject, detail }, transaction);
  });
}

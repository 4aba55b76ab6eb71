import { Refusal } from '$lib/domain/refusal';
import { recordEvent } from '../audit/record-event';
import { permit, type Actor } from '../auth/permissions';
import { permitSelf } from '../auth/permit-self';
import { inTransaction } from '../database/in-transaction';
import { withdrawInvitations } from '../database/queries/invitations';

/** Takes an invitation back: its link opens nothing from here on. */
export async function withdrawInvitation(actor: Actor | null, programmeId: string, id: string): Promise<void> {
  const { userId } = permit(permitSelf(actor), 'programme.invite', programmeId);
  await inTransaction(async (transaction) => {
    if (!(await withdrawInvitations({ programmeId, id }, transaction))) {
      throw new Refusal('not-found', 'There is no such invitation any more.', 'It may have been accepted meanwhile.');
    }
    const subject = `programme:${programmeId}`;
    await recordEvent({ userId, action: 'member.uninvite', subject, detail: { invitation: id } }, transaction);
  });
}

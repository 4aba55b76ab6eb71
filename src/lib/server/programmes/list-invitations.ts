import { programmesWhere, type Actor } from '../auth/permissions';
import { waitingInvitations } from '../database/queries/invitations';

export interface InvitationInList {
  id: string;
  programmeId: string;
  email: string;
  roles: string[];
  invitedBy: string;
  createdAt: string;
  expiresAt: string;
  letter: 'waiting' | 'sent' | 'failed' | null;
  problem: string | null;
}

/** Invitations that wait, of the programmes to which the actor may invite. */
export async function listInvitations(
  actor: Actor | null,
): Promise<{ mayInvite: string[]; invitations: InvitationInList[] }> {
  const mayInvite = programmesWhere(actor, 'programme.invite');
  const rows = await waitingInvitations(mayInvite);
  const invitations = rows.map((row) => ({
    ...row,
    createdAt: new Date(row.createdAt).toISOString(),
    expiresAt: new Date(row.expiresAt).toISOString(),
  }));
  return { mayInvite, invitations };
}

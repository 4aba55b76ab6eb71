import { Programme, User } from '../database/queries/people';
import { findInvitation } from './find-invitation';

export type InvitationView =
  | { kind: 'administrator' }
  | { kind: 'programme'; email: string; programme: string; roles: string[]; invitedBy: string; hasAccount: boolean };

/** Public use-case: the secret is the permission. What its link offers. */
export async function readInvitation(secret: string): Promise<InvitationView> {
  const { email, programmeId, roles, invitedBy } = await findInvitation(secret);
  if (!programmeId || !email) return { kind: 'administrator' };
  const [programme, inviter, account] = await Promise.all([
    Programme.findByPk(programmeId, { rejectOnEmpty: true }),
    invitedBy ? User.findByPk(invitedBy) : null,
    User.findOne({ where: { email } }),
  ]);
  return {
    kind: 'programme',
    email,
    programme: programme.name,
    roles: typeof roles === 'string' ? (JSON.parse(roles) as string[]) : (roles ?? []),
    invitedBy: inviter?.name ?? 'a curator',
    hasAccount: account !== null,
  };
}

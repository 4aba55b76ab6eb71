import { Op, QueryTypes, type Transaction } from 'sequelize';
import { database } from '../connection';
import { Invitation, ProgrammeMember } from '../models/people';

export interface WaitingInvitation {
  id: string;
  programmeId: string;
  email: string;
  roles: string[];
  invitedBy: string;
  createdAt: Date;
  expiresAt: Date;
  /** Of its letter: null where none was posted. */
  letter: 'waiting' | 'sent' | 'failed' | null;
  problem: string | null;
}

const parsed = (roles: string | string[]): string[] => (typeof roles === 'string' ? JSON.parse(roles) : roles);

/** Invitations to these programmes that can still be used, the newest first. */
export async function waitingInvitations(programmeIds: string[]): Promise<WaitingInvitation[]> {
  if (programmeIds.length === 0) return [];
  const rows = await database().query<WaitingInvitation>(
    `SELECT i.id, i.programme_id AS programmeId, i.email, i.roles, u.name AS invitedBy, i.created_at AS createdAt,
        i.expires_at AS expiresAt, l.state AS letter, l.problem
      FROM invitations i JOIN users u ON u.id = i.invited_by
      LEFT JOIN letters l ON l.id = (SELECT MAX(x.id) FROM letters x WHERE x.invitation_id = i.id)
      WHERE i.programme_id IN (:programmeIds) AND i.used_at IS NULL AND i.withdrawn_at IS NULL
        AND i.expires_at > UTC_TIMESTAMP(6) ORDER BY i.created_at DESC, i.id DESC`,
    { replacements: { programmeIds }, type: QueryTypes.SELECT },
  );
  return rows.map((row) => ({ ...row, roles: parsed(row.roles) }));
}

/** Takes back whatever invitations of an address to a programme can still be used; returns how many. */
export async function withdrawInvitations(
  where: { programmeId: string } & ({ email: string } | { id: string }),
  transaction: Transaction,
): Promise<number> {
  const open = { usedAt: null, withdrawnAt: null };
  const [changed] = await Invitation.update(
    { withdrawnAt: new Date() },
    { where: { ...where, ...open } as never, transaction },
  );
  return changed;
}

export function countWaiting(programmeId: string, transaction: Transaction): Promise<number> {
  const expiresAt = { [Op.gt]: new Date() };
  return Invitation.count({ where: { programmeId, usedAt: null, withdrawnAt: null, expiresAt } as never, transaction });
}

/** Uses an invitation up for a person: the roles it names that they lack are added. */
export async function useInvitation(invitation: Invitation, userId: string, transaction: Transaction): Promise<void> {
  const { programmeId, roles } = invitation;
  if (programmeId) {
    const rows = parsed(roles ?? []).map((role) => ({ programmeId, userId, role }));
    await ProgrammeMember.bulkCreate(rows, { ignoreDuplicates: true, transaction });
  }
  await invitation.update({ usedAt: new Date() }, { transaction });
}

/** Roles that whoever has this e-mail holds in a programme. */
export async function rolesOfEmail(programmeId: string, email: string): Promise<string[]> {
  const rows = await database().query<{ role: string }>(
    `SELECT m.role FROM programme_members m JOIN users u ON u.id = m.user_id
      WHERE m.programme_id = :programmeId AND u.email = :email`,
    { replacements: { programmeId, email }, type: QueryTypes.SELECT },
  );
  return rows.map(({ role }) => role);
}

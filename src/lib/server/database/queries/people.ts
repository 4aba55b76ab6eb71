import { Op, QueryTypes } from 'sequelize';
import { database } from '../connection';
import { Session } from '../models/people';

export { ApiToken, Invitation, Programme, ProgrammeMember, Session, User } from '../models/people';

export interface PersonRow {
  id: string;
  email: string;
  name: string;
  isAdmin: number;
  programmeId: string | null;
  role: string | null;
}

/** A person with one row a role held; empty where there is no such person. */
export function findPerson(userId: string): Promise<PersonRow[]> {
  return database().query<PersonRow>(
    `SELECT u.id, u.email, u.name, u.is_admin AS isAdmin, m.programme_id AS programmeId, m.role
       FROM users u LEFT JOIN programme_members m ON m.user_id = u.id WHERE u.id = :userId`,
    { replacements: { userId }, type: QueryTypes.SELECT },
  );
}

export async function deleteExpiredSessions(): Promise<void> {
  await Session.destroy({ where: { expiresAt: { [Op.lt]: new Date() } } });
}

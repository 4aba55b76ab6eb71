import { QueryTypes } from 'sequelize';
import { database } from '../connection';

export interface ProgrammeMemberRow {
  programmeId: string;
  slug: string;
  programmeName: string;
  isDemo: number;
  looks: number;
  userId: string;
  userName: string;
  role: string;
}

/** Members of the programmes with one row a role held, by the programmes' names, then the members'. */
export async function programmeMemberRows(programmeIds: string[]): Promise<ProgrammeMemberRow[]> {
  if (programmeIds.length === 0) return [];
  return database().query<ProgrammeMemberRow>(
    `SELECT p.id AS programmeId, p.slug, p.name AS programmeName, p.is_demo AS isDemo, p.looks, u.id AS userId,
        u.name AS userName, m.role
      FROM programmes p JOIN programme_members m ON m.programme_id = p.id JOIN users u ON u.id = m.user_id
      WHERE p.id IN (:programmeIds) ORDER BY p.name, p.id, u.name, u.id, m.role`,
    { replacements: { programmeIds }, type: QueryTypes.SELECT },
  );
}

/** Ids of all programmes, in the order of their founding. */
export async function allProgrammeIds(): Promise<string[]> {
  const rows = await database().query<{ id: string }>('SELECT id FROM programmes ORDER BY id', {
    type: QueryTypes.SELECT,
  });
  return rows.map(({ id }) => id);
}

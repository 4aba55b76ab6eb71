import { Op, QueryTypes, type Transaction } from 'sequelize';
import { database } from '../connection';
import { ApiToken, Session } from '../models/people';

/** Sessions of a person that have not run out, the newest first. */
export async function sessionsOf(userId: string): Promise<Session[]> {
  database();
  return Session.findAll({ where: { userId, expiresAt: { [Op.gt]: new Date() } }, order: [['startedAt', 'DESC']] });
}

/** Bearer tokens of a person, the newest first; those that have run out too, so that it is seen why one fails. */
export async function tokensOf(userId: string): Promise<ApiToken[]> {
  database();
  return ApiToken.findAll({ where: { userId }, order: [['createdAt', 'DESC']] });
}

/** Ends sessions of a person: one by its stored id, or all but one; returns how many. */
export function deleteSessions(
  userId: string,
  which: { id: string } | { allBut: string },
  transaction: Transaction,
): Promise<number> {
  const id = 'id' in which ? which.id : { [Op.ne]: which.allBut };
  return Session.destroy({ where: { userId, id }, transaction });
}

/** Whether a person wants the daily letter about mentions. */
export async function wantsMentionLetters(userId: string): Promise<boolean> {
  const rows = await database().query<{ wanted: number }>(
    'SELECT u.mention_letters AS wanted FROM users u WHERE u.id = :userId',
    { replacements: { userId }, type: QueryTypes.SELECT },
  );
  return !!rows[0]?.wanted;
}

export async function storeMentionLetters(userId: string, wanted: boolean): Promise<void> {
  await database().query('UPDATE users SET mention_letters = :wanted WHERE id = :userId', {
    replacements: { userId, wanted },
  });
}

import { QueryTypes, type Transaction } from 'sequelize';
import { database } from '../connection';

const select = { type: QueryTypes.SELECT } as const;

/** Members of a programme who may read its spectra, by name: those who can be mentioned. */
export function readersOf(programmeId: string): Promise<{ id: string; name: string }[]> {
  return database().query<{ id: string; name: string }>(
    `SELECT DISTINCT u.id, u.name FROM programme_members m JOIN users u ON u.id = m.user_id
      WHERE m.programme_id = :programmeId AND m.role IN ('observer', 'scientist', 'curator') ORDER BY u.name, u.id`,
    { replacements: { programmeId }, ...select },
  );
}

/** Writes whom a comment mentions; whoever answers on a spectrum has done with what called them there. */
export async function storeMentions(
  { commentId, spectrumId, authorId }: { commentId: string; spectrumId: string; authorId: string },
  userIds: readonly string[],
  transaction: Transaction,
): Promise<void> {
  for (const userId of userIds) {
    await database().query('INSERT IGNORE INTO comment_mentions (comment_id, user_id) VALUES (:commentId, :userId)', {
      replacements: { commentId, userId },
      transaction,
    });
  }
  await database().query(
    `UPDATE comment_mentions cm JOIN comments c ON c.id = cm.comment_id SET cm.done_at = UTC_TIMESTAMP(6)
      WHERE cm.user_id = :authorId AND c.spectrum_id = :spectrumId AND cm.done_at IS NULL AND c.id <> :commentId`,
    { replacements: { authorId, spectrumId, commentId }, transaction },
  );
}

/** A mention that its person has not done with: who wrote, where and when, never what. */
export interface MentionRow {
  commentId: string;
  spectrumId: string;
  programmeId: string;
  programmeName: string;
  name: string;
  by: string;
  at: Date;
}

const COLUMNS = `cm.comment_id AS commentId, c.spectrum_id AS spectrumId, f.programme_id AS programmeId,
  p.name AS programmeName, COALESCE(s.name, f.original_name) AS name, u.name AS \`by\`, c.created_at AS at
  FROM comment_mentions cm JOIN comments c ON c.id = cm.comment_id JOIN users u ON u.id = c.user_id
  JOIN spectra s ON s.id = c.spectrum_id JOIN files f ON f.id = s.file_id JOIN programmes p ON p.id = f.programme_id`;

/** Mentions of a person in some programmes that they have not done with, the newest first, at most 100. */
export async function openMentions(userId: string, programmeIds: readonly string[]): Promise<MentionRow[]> {
  if (programmeIds.length === 0) return [];
  return database().query<MentionRow>(
    `SELECT ${COLUMNS} WHERE cm.user_id = :userId AND cm.done_at IS NULL AND f.programme_id IN (:programmeIds)
      ORDER BY cm.comment_id DESC LIMIT 100`,
    { replacements: { userId, programmeIds }, ...select },
  );
}

/** Mentions that a letter tells of and that its person has not done with yet, the oldest first. */
export function mentionsOfLetter(letterId: string): Promise<MentionRow[]> {
  return database().query<MentionRow>(
    `SELECT ${COLUMNS} WHERE cm.letter_id = :letterId AND cm.done_at IS NULL ORDER BY cm.comment_id`,
    { replacements: { letterId }, ...select },
  );
}

/** Marks a mention of a person as done; returns whether there was one. */
export async function endMention(userId: string, commentId: string): Promise<void> {
  await database().query(
    `UPDATE comment_mentions SET done_at = UTC_TIMESTAMP(6)
      WHERE user_id = :userId AND comment_id = :commentId AND done_at IS NULL`,
    { replacements: { userId, commentId } },
  );
}

/** People who want letters, have mentions that no letter told of, and got no letter of this kind on a day (UTC). */
export async function peopleToTell(day: string): Promise<string[]> {
  const rows = await database().query<{ userId: string }>(
    `SELECT DISTINCT cm.user_id AS userId FROM comment_mentions cm JOIN users u ON u.id = cm.user_id
      WHERE cm.done_at IS NULL AND cm.letter_id IS NULL AND u.mention_letters AND NOT EXISTS (SELECT 1 FROM letters l
        WHERE l.kind = 'mention digest' AND l.user_id = cm.user_id AND l.day = :day)`,
    { replacements: { day }, ...select },
  );
  return rows.map(({ userId }) => userId);
}

/** Puts a person's untold mentions into a letter. */
export async function putInLetter(userId: string, letterId: string, transaction: Transaction): Promise<void> {
  await database().query(
    `UPDATE comment_mentions SET letter_id = :letterId
      WHERE user_id = :userId AND letter_id IS NULL AND done_at IS NULL`,
    { replacements: { userId, letterId }, transaction },
  );
}

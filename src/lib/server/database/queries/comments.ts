import { QueryTypes, type Transaction } from 'sequelize';
import { database } from '../connection';
import { SpectrumComment } from '../models/together';

export interface CommentRow {
  id: string;
  userId: string;
  by: string;
  text: string;
  shownToAll: number;
  createdAt: Date;
}

/** Comments on a spectrum, oldest first. What a reader may see of them is the use-case's to decide. */
export function commentsOn(spectrumId: string): Promise<CommentRow[]> {
  return database().query<CommentRow>(
    `SELECT c.id, c.user_id AS userId, u.name AS \`by\`, c.text, c.shown_to_all AS shownToAll, c.created_at AS createdAt
      FROM comments c JOIN users u ON u.id = c.user_id WHERE c.spectrum_id = :spectrumId ORDER BY c.id`,
    { replacements: { spectrumId }, type: QueryTypes.SELECT },
  );
}

/** Whether anyone has ever given a verdict on a spectrum, one taken back included. */
export async function everJudged(spectrumId: string, transaction: Transaction): Promise<boolean> {
  const rows = await database().query('SELECT 1 FROM verdicts WHERE spectrum_id = :spectrumId LIMIT 1', {
    replacements: { spectrumId },
    type: QueryTypes.SELECT,
    transaction,
  });
  return rows.length > 0;
}

export async function appendComment(
  comment: { spectrumId: string; userId: string; text: string; shownToAll: boolean },
  transaction: Transaction,
): Promise<string> {
  database();
  const { id } = await SpectrumComment.create(comment as never, { transaction });
  return id;
}

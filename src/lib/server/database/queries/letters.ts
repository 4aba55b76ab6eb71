import { QueryTypes, type Transaction } from 'sequelize';
import { database } from '../connection';
import { newIdentifier } from '../identifier';

export type LetterKind = 'invitation' | 'night report' | 'mention digest';

/** What a letter is about; a person has one report of a night, and one digest a day (UTC). */
export interface LetterAbout {
  kind: LetterKind;
  invitationId?: string;
  nightId?: string;
  userId?: string;
  day?: string;
}

export interface LetterRow {
  id: string;
  kind: LetterKind;
  invitationId: string | null;
  nightId: string | null;
  userId: string | null;
  state: 'waiting' | 'sent' | 'failed';
  tries: number;
}

/** Writes a letter to be sent; null where the person has it already. */
export async function insertLetter(letter: LetterAbout, transaction: Transaction): Promise<string | null> {
  const { kind, invitationId = null, nightId = null, userId = null, day = null } = letter;
  const id = newIdentifier();
  await database().query(
    `INSERT IGNORE INTO letters (id, kind, invitation_id, night_id, user_id, day)
      VALUES (:id, :kind, :invitationId, :nightId, :userId, :day)`,
    { replacements: { id, kind, invitationId, nightId, userId, day }, transaction },
  );
  const rows = await database().query('SELECT id FROM letters WHERE id = :id', {
    replacements: { id },
    type: QueryTypes.SELECT,
    transaction,
  });
  return rows.length ? id : null;
}

/** A letter, its try counted first, so that one which takes the process down is counted too. */
export async function takeLetter(id: string): Promise<LetterRow | null> {
  await database().query(`UPDATE letters SET tries = tries + 1 WHERE id = :id AND state = 'waiting'`, {
    replacements: { id },
  });
  const [row] = await database().query<LetterRow>(
    `SELECT id, kind, invitation_id AS invitationId, night_id AS nightId, user_id AS userId, state, tries
      FROM letters WHERE id = :id`,
    { replacements: { id }, type: QueryTypes.SELECT },
  );
  return row ?? null;
}

export async function settleLetter(
  id: string,
  settled: { state: 'sent' | 'failed'; problem: string | null },
  transaction: Transaction,
): Promise<void> {
  await database().query(
    `UPDATE letters SET state = :state, problem = :problem, sent_at = IF(:state = 'sent', UTC_TIMESTAMP(6), NULL)
      WHERE id = :id`,
    { replacements: { id, ...settled }, transaction },
  );
}

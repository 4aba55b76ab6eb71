import { QueryTypes, type Transaction } from 'sequelize';
import { database } from '../connection';

/** Whether a person ever gave a verdict on a spectrum, one taken back included. */
export async function hasJudged(userId: string, spectrumId: string, transaction: Transaction): Promise<boolean> {
  const rows = await database().query(
    'SELECT 1 FROM verdicts WHERE spectrum_id = :spectrumId AND user_id = :userId LIMIT 1',
    { replacements: { userId, spectrumId }, type: QueryTypes.SELECT, transaction },
  );
  return rows.length > 0;
}

/** Spectra of a programme on which a person ever gave a verdict, those taken back included. */
export async function everJudgedBy(userId: string, programmeId: string): Promise<Set<string>> {
  const rows = await database().query<{ id: string }>(
    `SELECT DISTINCT w.spectrum_id AS id FROM verdicts w JOIN spectra s ON s.id = w.spectrum_id
      JOIN files f ON f.id = s.file_id WHERE w.user_id = :userId AND f.programme_id = :programmeId`,
    { replacements: { userId, programmeId }, type: QueryTypes.SELECT },
  );
  return new Set(rows.map(({ id }) => id));
}

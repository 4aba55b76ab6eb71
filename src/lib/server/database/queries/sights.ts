import { QueryTypes, type Transaction } from 'sequelize';
import { database } from '../connection';

/**
 * Notes that a person was shown something of others' verdicts on these spectra, the first time only: what they say of them
 * from now on is no blind look.
 */
export async function noteSights(userId: string, spectrumIds: readonly string[]): Promise<void> {
  if (spectrumIds.length === 0) return;
  const known = await database().query<{ id: string }>(
    'SELECT spectrum_id AS id FROM sights WHERE user_id = :userId AND spectrum_id IN (:spectrumIds)',
    { replacements: { userId, spectrumIds }, type: QueryTypes.SELECT },
  );
  const seen = new Set(known.map(({ id }) => id));
  const fresh = spectrumIds.filter((id) => !seen.has(id));
  if (fresh.length === 0) return;
  await database().query(
    'INSERT IGNORE INTO sights (user_id, spectrum_id) SELECT :userId, s.id FROM spectra s WHERE s.id IN (:fresh)',
    { replacements: { userId, fresh } },
  );
}

/** Whether a person was ever shown something of others' verdicts on a spectrum. */
export async function hasSeen(userId: string, spectrumId: string, transaction: Transaction): Promise<boolean> {
  const rows = await database().query(
    'SELECT 1 FROM sights WHERE user_id = :userId AND spectrum_id = :spectrumId LIMIT 1',
    { replacements: { userId, spectrumId }, type: QueryTypes.SELECT, transaction },
  );
  return rows.length > 0;
}

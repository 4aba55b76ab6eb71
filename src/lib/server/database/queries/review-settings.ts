import { randomBytes } from 'node:crypto';
import { QueryTypes, type Transaction } from 'sequelize';
import { database } from '../connection';

/** How a programme reviews. */
export interface ReviewSettings {
  programmeId: string;
  /** Looks asked for at each spectrum. */
  looks: number;
  /** Share of looks given without the engine's answer, 0 to 1. */
  hiddenShare: number;
  /** Share of dealt spectra that are planted, 0 to 1. */
  plantedRate: number;
  /** What the draw of hidden looks follows from; never sent to anyone. Empty where nothing was ever set. */
  seed: string;
}

/** Settings of some programmes, by id; nothing hidden, nothing planted where they were never set. */
export async function reviewSettings(programmeIds: readonly string[]): Promise<Map<string, ReviewSettings>> {
  if (programmeIds.length === 0) return new Map();
  const rows = await database().query<ReviewSettings>(
    `SELECT p.id AS programmeId, p.looks, COALESCE(r.hidden_share, 0) AS hiddenShare,
        COALESCE(r.planted_rate, 0) AS plantedRate, COALESCE(r.seed, '') AS seed
      FROM programmes p LEFT JOIN review_settings r ON r.programme_id = p.id WHERE p.id IN (:programmeIds)`,
    { replacements: { programmeIds }, type: QueryTypes.SELECT },
  );
  return new Map(rows.map((row) => [row.programmeId, { ...row, looks: Number(row.looks) }]));
}

/** Writes settings; the seed is made once and kept, so that who looks at what without the answer does not change. */
export async function storeReviewSettings(
  { programmeId, looks, hiddenShare, plantedRate }: Omit<ReviewSettings, 'seed'>,
  userId: string,
  transaction: Transaction,
): Promise<void> {
  const replacements = { programmeId, looks, hiddenShare, plantedRate, userId, seed: randomBytes(32).toString('hex') };
  await database().query(
    `INSERT INTO review_settings (programme_id, hidden_share, planted_rate, seed, changed_by)
      VALUES (:programmeId, :hiddenShare, :plantedRate, :seed, :userId)
      ON DUPLICATE KEY UPDATE hidden_share = :hiddenShare, planted_rate = :plantedRate, changed_by = :userId,
        changed_at = UTC_TIMESTAMP(6)`,
    { replacements, transaction },
  );
  await database().query('UPDATE programmes SET looks = :looks WHERE id = :programmeId', { replacements, transaction });
}

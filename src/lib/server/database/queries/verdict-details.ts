import { QueryTypes, type Transaction } from 'sequelize';
import { masksSchema } from '$lib/domain/mask';
import type { VerdictDetails } from '$lib/domain/verdict';
import { database } from '../connection';

export const NO_DETAILS: VerdictDetails = { masks: [], secondRedshift: null, secondRedshiftError: null };

/** Kept with a verdict as it is appended, in the same transaction; nothing is written where there is nothing. */
export async function keepDetails(verdictId: string, details: VerdictDetails, transaction: Transaction): Promise<void> {
  const { masks, secondRedshift, secondRedshiftError } = details;
  if (masks.length === 0 && secondRedshift === null) return;
  await database().query(
    `INSERT INTO verdict_details (verdict_id, masks, second_redshift, second_redshift_error)
      VALUES (:verdictId, :masks, :secondRedshift, :secondRedshiftError)`,
    { replacements: { verdictId, masks: JSON.stringify(masks), secondRedshift, secondRedshiftError }, transaction },
  );
}

/** Details by verdict, for those that have any. Asked for only where the reader may see the verdicts. */
export async function detailsOf(
  verdictIds: readonly string[],
  transaction?: Transaction,
): Promise<Map<string, VerdictDetails>> {
  if (verdictIds.length === 0) return new Map();
  const rows = await database().query<VerdictDetails & { verdictId: string; masks: unknown }>(
    `SELECT d.verdict_id AS verdictId, d.masks, d.second_redshift AS secondRedshift,
        d.second_redshift_error AS secondRedshiftError
      FROM verdict_details d WHERE d.verdict_id IN (:verdictIds)`,
    { replacements: { verdictIds }, type: QueryTypes.SELECT, transaction },
  );
  return new Map(
    rows.map(({ verdictId, masks, ...rest }) => [
      verdictId,
      { ...rest, masks: masksSchema.parse(typeof masks === 'string' ? JSON.parse(masks) : masks) },
    ]),
  );
}

import { QueryTypes, type Transaction } from 'sequelize';
import { POSITION_TOLERANCE_ARCSEC, positionDoubt } from '$lib/domain/position-doubt';
import { database } from '../connection';
import { listedTargets } from './target-register';

interface Row {
  id: string;
  name: string;
  file: string;
  raDegrees: number;
  decDegrees: number;
  tolerance: number | string | null;
  isDoubted: number;
}

/**
 * Compares the position in the header of every spectrum of a programme with its target lists, and keeps what is odd;
 * returns how many are.
 */
export async function judgePositions(programmeId: string, transaction: Transaction): Promise<number> {
  const listed = await listedTargets(programmeId, transaction);
  const rows = await database().query<Row>(
    `SELECT s.id, COALESCE(s.name, f.original_name) AS name, f.original_name AS file, s.ra_degrees AS raDegrees,
        s.dec_degrees AS decDegrees, JSON_VALUE(i.description, '$.positionToleranceArcsec') AS tolerance,
        s.position_doubt IS NOT NULL AS isDoubted
      FROM files f JOIN spectra s ON s.file_id = f.id LEFT JOIN instruments i ON i.id = f.instrument_id
      WHERE f.programme_id = :programmeId AND s.ra_degrees IS NOT NULL AND s.dec_degrees IS NOT NULL`,
    { replacements: { programmeId }, type: QueryTypes.SELECT, transaction },
  );
  let doubts = 0;
  for (const { id, name, file, raDegrees, decDegrees, tolerance, isDoubted } of rows) {
    const allowed = tolerance === null ? POSITION_TOLERANCE_ARCSEC : Number(tolerance);
    const doubt = positionDoubt({ name, raDegrees, decDegrees }, allowed, listed, file);
    if (doubt) doubts++;
    if (!doubt && !isDoubted) continue;
    await database().query('UPDATE spectra SET position_doubt = :doubt WHERE id = :id', {
      replacements: { id, doubt: doubt && JSON.stringify(doubt) },
      transaction,
    });
  }
  return doubts;
}

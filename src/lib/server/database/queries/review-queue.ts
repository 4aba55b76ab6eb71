import { QueryTypes } from 'sequelize';
import { database } from '../connection';
import { CURRENT_MEASUREMENT } from './night-snapshot';
import { judgedBy } from './verdicts';

const JUDGED = judgedBy(':userId');

export interface QueueRow {
  id: string;
  name: string;
  confidence: string;
  redshift: number | null;
  probability: number;
  entropyBits: number;
  judged: number;
  nightId: string;
  civilDate: string;
  programmeId: string;
  /** Looks the programme asks for. */
  wanted: number;
}

/** The review queue of some programmes, most uncertain first, at most 5,000. */
export async function queueRows(
  programmeIds: string[],
  userId: string,
  filter: { night?: string; confidence?: string; waitingOnly: boolean },
): Promise<QueueRow[]> {
  if (programmeIds.length === 0) return [];
  const { night = null, confidence = null, waitingOnly } = filter;
  return database().query<QueueRow>(
    `SELECT s.id, COALESCE(s.name, f.original_name) AS name, m.confidence, m.redshift, m.probability,
        m.entropy_bits AS entropyBits, ${JUDGED} AS judged,
        f.programme_id AS programmeId, p.looks AS wanted, MIN(n.id) AS nightId, MIN(n.civil_date) AS civilDate
      FROM spectra s JOIN files f ON f.id = s.file_id JOIN measurements m ON m.spectrum_id = s.id AND ${CURRENT_MEASUREMENT}
      JOIN programmes p ON p.id = f.programme_id JOIN night_files nf ON nf.file_id = f.id JOIN nights n ON n.id = nf.night_id
      WHERE f.programme_id IN (:programmeIds) AND s.state = 'measured' AND (:night IS NULL OR n.id = :night)
        AND (:confidence IS NULL OR m.confidence = :confidence)
        ${waitingOnly ? `AND NOT ${JUDGED}` : ''}
      GROUP BY s.id, m.id ORDER BY m.entropy_bits DESC, s.id LIMIT 5000`,
    { replacements: { programmeIds, userId, night, confidence }, type: QueryTypes.SELECT },
  );
}

import { QueryTypes } from 'sequelize';
import { database } from '../connection';
import { CURRENT_MEASUREMENT } from './night-snapshot';
import { judgedBy } from './verdicts';
import { CURRENT_REDUCTION, OBSERVED } from './observed';

const JUDGED = judgedBy(':userId');

export interface QueueRow {
  id: string;
  name: string;
  confidence: string;
  redshift: number | null;
  probability: number;
  entropyBits: number;
  judged: number;
  /** 1 where the asker ever gave a verdict on it, one taken back included. */
  everJudged: number;
  nightId: string;
  civilDate: string;
  programmeId: string;
  programmeName: string;
  /** Looks the programme asks for. */
  wanted: number;
  /** The programme's own, of any scale, the larger the more urgent. */
  priority: number | null;
  ageDays: number;
  /** 0 for a spectrum of the sky; its place among those of its night for one with a known answer, from 1. */
  planted: number;
  /** Measured spectra of the sky in its night; known for planted ones only. */
  nightSpectra: number | null;
}

/** The review queue of some programmes, most uncertain first, at most 5,000. Planted spectra stand in it as of their night. */
export async function queueRows(
  programmeIds: string[],
  userId: string,
  filter: { night?: string; confidence?: string },
): Promise<QueueRow[]> {
  if (programmeIds.length === 0) return [];
  const { night = null, confidence = null } = filter;
  return database().query<QueueRow>(
    `SELECT s.id, COALESCE(s.name, f.original_name) AS name, m.confidence, m.redshift, m.probability,
        m.entropy_bits AS entropyBits, ${JUDGED} AS judged,
        EXISTS (SELECT 1 FROM verdicts e WHERE e.spectrum_id = s.id AND e.user_id = :userId) AS everJudged,
        f.programme_id AS programmeId, p.name AS programmeName,
        p.looks AS wanted, MIN(n.id) AS nightId, MIN(n.civil_date) AS civilDate,
        t.priority, DATEDIFF(UTC_TIMESTAMP(), s.created_at) AS ageDays, COALESCE(pl.place, 0) AS planted,
        IF(pl.place IS NULL, NULL, (SELECT COUNT(*) FROM night_files nx JOIN spectra x ON x.file_id = nx.file_id
          WHERE nx.night_id = pl.night_id AND x.state = 'measured')) AS nightSpectra
      FROM spectra s JOIN files f ON f.id = s.file_id JOIN measurements m ON m.spectrum_id = s.id AND ${CURRENT_MEASUREMENT}
      JOIN programmes p ON p.id = f.programme_id LEFT JOIN planted_spectra pl ON pl.spectrum_id = s.id
      LEFT JOIN spectra donor ON donor.id = pl.donor_id
      LEFT JOIN targets t ON t.id = COALESCE(s.target_id, donor.target_id) LEFT JOIN night_files nf ON nf.file_id = f.id
      JOIN nights n ON n.id = COALESCE(nf.night_id, pl.night_id)
      WHERE f.programme_id IN (:programmeIds) AND s.state = 'measured' AND ${CURRENT_REDUCTION} AND (:night IS NULL OR n.id = :night)
        AND (:confidence IS NULL OR m.confidence = :confidence)
      GROUP BY s.id, m.id ORDER BY m.entropy_bits DESC, s.id LIMIT 5000`,
    { replacements: { programmeIds, userId, night, confidence }, type: QueryTypes.SELECT },
  );
}

export interface TargetAnswerRow {
  id: string;
  targetId: string;
  redshift: number;
  redshiftError: number | null;
}

/** The engine's redshifts of targets that have several spectra, none of a reduction that was replaced. */
export async function answersOfRepeats(programmeIds: string[]): Promise<TargetAnswerRow[]> {
  if (programmeIds.length === 0) return [];
  return database().query<TargetAnswerRow>(
    `SELECT s.id, s.target_id AS targetId, m.redshift, m.redshift_error AS redshiftError
      FROM files f JOIN spectra s ON s.file_id = f.id
      JOIN measurements m ON m.spectrum_id = s.id AND ${CURRENT_MEASUREMENT}
      WHERE f.programme_id IN (:programmeIds) AND s.target_id IS NOT NULL AND ${OBSERVED}
        AND m.redshift IS NOT NULL
        AND EXISTS (SELECT 1 FROM spectra x WHERE x.target_id = s.target_id AND x.id <> s.id)
      ORDER BY s.id`,
    { replacements: { programmeIds }, type: QueryTypes.SELECT },
  );
}

/** Every priority that a programme gives its targets, once. */
export async function prioritiesOf(programmeIds: string[]): Promise<{ programmeId: string; priority: number }[]> {
  if (programmeIds.length === 0) return [];
  return database().query(
    `SELECT DISTINCT t.programme_id AS programmeId, t.priority FROM targets t
      WHERE t.programme_id IN (:programmeIds) AND t.priority IS NOT NULL`,
    { replacements: { programmeIds }, type: QueryTypes.SELECT },
  );
}

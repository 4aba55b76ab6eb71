import { QueryTypes } from 'sequelize';
import type { Confidence } from '$lib/domain/confidence';
import { database } from '../connection';
import { INDEPENDENT } from './combinations';
import { CURRENT_MEASUREMENT } from './night-snapshot';
import { NOT_PLANTED } from './planted';

export interface RepeatRow {
  id: string;
  targetId: string;
  target: string;
  civilDate: string;
  redshift: number;
  redshiftError: number;
  confidence: Confidence;
}

/**
 * What the engine says of targets with several spectra that share no photons, target by target in the order of time. The
 * error is the measurement's own: what an object does by itself, such as a quasar's moving lines, its repeats share.
 */
export function repeatRows(programmeId: string): Promise<RepeatRow[]> {
  return database().query<RepeatRow>(
    `SELECT * FROM (SELECT s.id, s.target_id AS targetId, t.name AS target, MIN(n.civil_date) AS civilDate, m.redshift,
        COALESCE(m.redshift_error_measured, m.redshift_error) AS redshiftError, m.confidence, s.mid_exposure AS mid,
        COUNT(*) OVER (PARTITION BY s.target_id) AS among
      FROM targets t JOIN spectra s ON s.target_id = t.id
      JOIN measurements m ON m.spectrum_id = s.id AND ${CURRENT_MEASUREMENT}
      JOIN night_files nf ON nf.file_id = s.file_id JOIN nights n ON n.id = nf.night_id
      WHERE t.programme_id = :programmeId AND s.state = 'measured' AND m.redshift IS NOT NULL
        AND COALESCE(m.redshift_error_measured, m.redshift_error) > 0 AND ${INDEPENDENT} AND ${NOT_PLANTED}
      GROUP BY s.id, m.id) r WHERE among > 1 ORDER BY targetId, civilDate, mid, id LIMIT 50000`,
    { replacements: { programmeId }, type: QueryTypes.SELECT },
  );
}

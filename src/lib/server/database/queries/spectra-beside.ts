import { QueryTypes } from 'sequelize';
import { database } from '../connection';
import { NOT_PLANTED } from './planted';

export interface BesideRow {
  id: string;
  kind: string;
  civilDate: string;
  exposureSeconds: number | null;
  /** It is part of the spectrum asked about, or that of it. */
  sharesPhotons: number;
}

/** Most that are told apart in one plot. */
const MOST = 8;

/** Other measured spectra of a spectrum's target, those that share its photons first, then by night; planted ones left out. */
export async function spectraBeside(spectrumId: string): Promise<BesideRow[]> {
  return database().query<BesideRow>(
    `SELECT s.id, s.kind, MIN(n.civil_date) AS civilDate, s.exposure_seconds AS exposureSeconds,
        EXISTS (SELECT 1 FROM spectrum_parts sp WHERE (sp.part_id = s.id AND sp.whole_id = here.id)
          OR (sp.part_id = here.id AND sp.whole_id = s.id)) AS sharesPhotons
      FROM spectra here JOIN spectra s ON s.target_id = here.target_id AND s.id <> here.id
      JOIN files f ON f.id = s.file_id JOIN night_files nf ON nf.file_id = f.id JOIN nights n ON n.id = nf.night_id
      WHERE here.id = :spectrumId AND s.state = 'measured' AND s.superseded_by IS NULL AND ${NOT_PLANTED}
      GROUP BY s.id, here.id ORDER BY sharesPhotons DESC, MIN(n.civil_date), s.mid_exposure, s.id LIMIT ${MOST}`,
    { replacements: { spectrumId }, type: QueryTypes.SELECT },
  );
}

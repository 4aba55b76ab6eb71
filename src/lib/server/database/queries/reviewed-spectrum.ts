import { QueryTypes } from 'sequelize';
import type { Instrument } from '$lib/domain/instrument';
import type { Measurement } from '$lib/domain/measurement';
import { database } from '../connection';
import { CURRENT_MEASUREMENT } from './night-snapshot';

export interface ReviewedSpectrum {
  id: string;
  name: string | null;
  originalName: string;
  programmeId: string;
  programmeName: string;
  instrumentName: string | null;
  instrument: Instrument | null;
  nightId: string;
  civilDate: string;
  exposureSeconds: number | null;
  extension: number;
  rowIndex: number;
  sha256: string;
  measurementId: string;
  measurement: Measurement;
  entropyBits: number;
  /** 1 for one with a known answer, which nobody is told. */
  planted: number;
  verdictCount: number | string;
}

const UUID = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i;

/** A measured spectrum with its current measurement and where it came from; null where there is none. */
export async function findReviewed(spectrumId: string): Promise<ReviewedSpectrum | null> {
  if (!UUID.test(spectrumId)) return null;
  const [row] = await database().query<ReviewedSpectrum & { detail: string | Measurement }>(
    `SELECT s.id, s.name, f.original_name AS originalName, f.programme_id AS programmeId, p.name AS programmeName,
        i.name AS instrumentName, i.description AS instrument, n.id AS nightId, n.civil_date AS civilDate,
        s.exposure_seconds AS exposureSeconds, s.extension, s.row_index AS rowIndex, f.sha256, m.id AS measurementId,
        m.detail, m.entropy_bits AS entropyBits, pl.spectrum_id IS NOT NULL AS planted,
        (SELECT COUNT(DISTINCT v.user_id) FROM verdicts v WHERE v.spectrum_id = s.id AND v.kind <> 'withdrawn'
          AND NOT EXISTS (SELECT 1 FROM verdicts later WHERE later.supersedes = v.id)) AS verdictCount
      FROM spectra s JOIN files f ON f.id = s.file_id JOIN programmes p ON p.id = f.programme_id
      JOIN measurements m ON m.spectrum_id = s.id AND ${CURRENT_MEASUREMENT}
      LEFT JOIN planted_spectra pl ON pl.spectrum_id = s.id LEFT JOIN night_files nf ON nf.file_id = f.id
      JOIN nights n ON n.id = COALESCE(nf.night_id, pl.night_id)
      LEFT JOIN instruments i ON i.id = COALESCE(m.instrument_id, f.instrument_id)
      WHERE s.id = :spectrumId ORDER BY n.civil_date LIMIT 1`,
    { replacements: { spectrumId }, type: QueryTypes.SELECT },
  );
  if (!row) return null;
  const { detail, instrument, ...rest } = row;
  return {
    ...rest,
    measurement: typeof detail === 'string' ? (JSON.parse(detail) as Measurement) : detail,
    instrument: typeof instrument === 'string' ? (JSON.parse(instrument) as Instrument) : instrument,
  };
}

import { QueryTypes } from 'sequelize';
import type { Confidence } from '$lib/domain/confidence';
import type { Instrument } from '$lib/domain/instrument';
import type { Candidate } from '$lib/domain/measurement';
import { database } from '../connection';
import { CURRENT_MEASUREMENT } from './night-snapshot';
import { OBSERVED } from './observed';

const select = { type: QueryTypes.SELECT } as const;
const parsed = <T>(value: T | string | null): T | null =>
  typeof value === 'string' ? (JSON.parse(value) as T) : value;

/** A spectrum of a night as its report needs it; `first` is the likeliest candidate. */
export interface ReportRow {
  spectrum: string;
  target: string | null;
  exposureSeconds: number | null;
  entropyBits: number;
  confidence: Confidence;
  first: Pick<Candidate, 'redshift' | 'lines'> | null;
}

/** The measured spectra of a night, in the order of their ids; candidates only where the answer is not secure. */
export async function reportRows(nightId: string): Promise<ReportRow[]> {
  const rows = await database().query<Omit<ReportRow, 'first'> & { first: string | Candidate | null }>(
    `SELECT s.id AS spectrum, s.target_id AS target, s.exposure_seconds AS exposureSeconds,
        m.entropy_bits AS entropyBits, m.confidence,
        IF(m.confidence = 'secure', NULL, JSON_EXTRACT(m.detail, '$.candidates[0]')) AS first
      FROM night_files nf JOIN spectra s ON s.file_id = nf.file_id
      JOIN measurements m ON m.spectrum_id = s.id AND ${CURRENT_MEASUREMENT}
      WHERE nf.night_id = :nightId AND ${OBSERVED} ORDER BY s.id`,
    { replacements: { nightId }, ...select },
  );
  return rows.map((row) => ({ ...row, first: parsed<Candidate>(row.first) }));
}

/** First and last mid-exposure of a night and the longest exposure, by what the files say. */
export async function exposureSpan(
  nightId: string,
): Promise<{ first: Date | null; last: Date | null; lastEnds: Date | null }> {
  const [row] = await database().query<{ first: string | null; last: string | null; lastEnds: string | null }>(
    `SELECT MIN(s.mid_exposure) AS first, MAX(s.mid_exposure) AS last,
        MAX(s.mid_exposure + INTERVAL COALESCE(s.exposure_seconds, 0) / 2 SECOND) AS lastEnds
      FROM night_files nf JOIN spectra s ON s.file_id = nf.file_id WHERE nf.night_id = :nightId`,
    { replacements: { nightId }, ...select },
  );
  const date = (value: string | null) => (value === null ? null : new Date(value));
  return { first: date(row.first), last: date(row.last), lastEnds: date(row.lastEnds) };
}

/** The instrument that a night's files are read by; null where the programme has none. */
export async function instrumentOfNight(nightId: string): Promise<Instrument | null> {
  const [row] = await database().query<{ description: string | Instrument }>(
    'SELECT i.description FROM nights n JOIN instruments i ON i.id = n.instrument_id WHERE n.id = :nightId',
    { replacements: { nightId }, ...select },
  );
  return row ? parsed<Instrument>(row.description) : null;
}

/** A night whose report may be due, with whoever opened it. */
export interface NightAtRest {
  id: string;
  civilDate: string;
  createdBy: string;
  instrument: Instrument | null;
}

/**
 * Nights in which nothing waits, nothing came within `quietSeconds` and something did within `sinceSeconds`, and whose
 * report was not posted yet.
 */
export async function nightsAtRest(now: Date, quietSeconds: number, sinceSeconds: number): Promise<NightAtRest[]> {
  const rows = await database().query<Omit<NightAtRest, 'instrument'> & { description: string | Instrument | null }>(
    `SELECT n.id, n.civil_date AS civilDate, n.created_by AS createdBy, i.description
      FROM nights n LEFT JOIN instruments i ON i.id = n.instrument_id
      WHERE (SELECT MAX(nf.added_at) FROM night_files nf WHERE nf.night_id = n.id)
          BETWEEN :now - INTERVAL :sinceSeconds SECOND AND :now - INTERVAL :quietSeconds SECOND
        AND NOT EXISTS (SELECT 1 FROM letters l WHERE l.night_id = n.id AND l.kind = 'night report')
        AND NOT EXISTS (SELECT 1 FROM night_files nf JOIN files f ON f.id = nf.file_id
          WHERE nf.night_id = n.id AND f.state = 'waiting')
        AND NOT EXISTS (SELECT 1 FROM night_files nf JOIN spectra s ON s.file_id = nf.file_id
          WHERE nf.night_id = n.id AND s.state = 'waiting')
        AND NOT EXISTS (SELECT 1 FROM uploads u WHERE u.night_id = n.id AND u.state = 'unpacking')`,
    { replacements: { now, quietSeconds, sinceSeconds }, ...select },
  );
  return rows.map(({ description, ...row }) => ({ ...row, instrument: parsed<Instrument>(description) }));
}

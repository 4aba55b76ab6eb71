import { QueryTypes, type Transaction } from 'sequelize';
import { database } from '../connection';
import { CURRENT_MEASUREMENT } from './night-snapshot';
import { CURRENT_REDUCTION } from './observed';
import { NOT_PLANTED } from './planted';

/** A spectrum of a programme with its current measurement. */
export interface MeasuredSpectrumRow {
  spectrumId: string;
  targetId: string;
  targetName: string;
  ra: number | null;
  dec: number | null;
  measurementId: string | null;
  redshift: number | null;
  redshiftError: number | null;
  probability: number | null;
  confidence: 'secure' | 'probable' | 'ambiguous' | 'none' | null;
}

/** Every spectrum of the programme in the order of ids. A spectrum without a target stands for itself. */
export function measuredSpectra(programmeId: string, transaction?: Transaction): Promise<MeasuredSpectrumRow[]> {
  return database().query<MeasuredSpectrumRow>(
    `SELECT s.id AS spectrumId, COALESCE(s.target_id, s.id) AS targetId,
        COALESCE(t.name, s.name, CONCAT('spectrum ', s.id)) AS targetName,
        COALESCE(t.ra_degrees, s.ra_degrees) AS ra, COALESCE(t.dec_degrees, s.dec_degrees) AS \`dec\`,
        m.id AS measurementId, m.redshift, m.redshift_error AS redshiftError, m.probability, m.confidence
      FROM files f JOIN spectra s ON s.file_id = f.id LEFT JOIN targets t ON t.id = s.target_id
      LEFT JOIN measurements m ON m.spectrum_id = s.id AND ${CURRENT_MEASUREMENT}
      WHERE f.programme_id = :programmeId AND ${CURRENT_REDUCTION} AND ${NOT_PLANTED} ORDER BY s.id`,
    { replacements: { programmeId }, type: QueryTypes.SELECT, transaction },
  );
}

export interface StandingVerdictRow {
  id: string;
  spectrumId: string;
  userId: string;
  measurementId: string | null;
  kind: 'candidate' | 'by hand' | 'no redshift';
  redshift: number | null;
  redshiftError: number | null;
  candidatePlace: number | null;
  confidence: 'secure' | 'probable' | 'ambiguous' | 'none' | null;
  restores: string | null;
}

/** Verdicts in the programme that are neither withdrawn nor superseded, oldest first. */
export function standingVerdicts(programmeId: string, transaction?: Transaction): Promise<StandingVerdictRow[]> {
  return database().query<StandingVerdictRow>(
    `SELECT w.id, w.spectrum_id AS spectrumId, w.user_id AS userId, w.measurement_id AS measurementId, w.kind, w.redshift,
        w.redshift_error AS redshiftError, w.candidate_place AS candidatePlace, w.confidence, w.restores
      FROM files f JOIN spectra s ON s.file_id = f.id JOIN verdicts w ON w.spectrum_id = s.id
      WHERE f.programme_id = :programmeId AND ${NOT_PLANTED} AND w.kind <> 'withdrawn'
        AND NOT EXISTS (SELECT 1 FROM verdicts later WHERE later.supersedes = w.id) ORDER BY w.id`,
    { replacements: { programmeId }, type: QueryTypes.SELECT, transaction },
  );
}

export interface CandidateRow {
  measurementId: string;
  place: number;
  redshift: number;
  redshiftError: number;
  probability: number;
  objectClass: string;
}

/** Measurement ids of one query; keeps a statement well under the server's packet size. */
const CHUNK = 500;

async function inChunks<T>(ids: string[], read: (chunk: string[]) => Promise<T[]>): Promise<T[]> {
  const rows: T[] = [];
  for (let i = 0; i < ids.length; i += CHUNK) rows.push(...(await read(ids.slice(i, i + CHUNK))));
  return rows;
}

export function candidatesOf(measurementIds: string[], transaction?: Transaction): Promise<CandidateRow[]> {
  return inChunks(measurementIds, (ids) =>
    database().query<CandidateRow>(
      `SELECT measurement_id AS measurementId, place, redshift, redshift_error AS redshiftError, probability,
          object_class AS objectClass FROM candidates WHERE measurement_id IN (:ids) ORDER BY measurement_id, place`,
      { replacements: { ids }, type: QueryTypes.SELECT, transaction },
    ),
  );
}

export interface MeasurementFacts {
  measurementId: string;
  fluxUnit: string | null;
  engineVersion: string;
}

export function measurementFacts(measurementIds: string[], transaction?: Transaction): Promise<MeasurementFacts[]> {
  return inChunks(measurementIds, (ids) =>
    database().query<MeasurementFacts>(
      `SELECT m.id AS measurementId, m.flux_unit AS fluxUnit, m.engine_version AS engineVersion
        FROM measurements m WHERE m.id IN (:ids)`,
      { replacements: { ids }, type: QueryTypes.SELECT, transaction },
    ),
  );
}

export interface LineFluxRow {
  measurementId: string;
  line: string;
  flux: number | null;
  fluxError: number | null;
}

/** Fluxes of some lines of a candidate; every candidate's lines stand in the measurement's detail. */
export async function lineFluxes(
  measurementIds: string[],
  place: number,
  lines: readonly string[],
  transaction?: Transaction,
): Promise<LineFluxRow[]> {
  const rows = await inChunks(measurementIds, (ids) =>
    database().query<{ measurementId: string; fits: string | LineFluxRow[] | null }>(
      `SELECT m.id AS measurementId, JSON_EXTRACT(m.detail, :path) AS fits FROM measurements m WHERE m.id IN (:ids)`,
      { replacements: { ids, path: `$.candidates[${Math.trunc(place)}].lines` }, type: QueryTypes.SELECT, transaction },
    ),
  );
  return rows.flatMap(({ measurementId, fits }) => {
    const parsed = typeof fits === 'string' ? (JSON.parse(fits) as LineFluxRow[]) : (fits ?? []);
    return parsed
      .filter(({ line }) => lines.includes(line))
      .map(({ line, flux, fluxError }) => ({ measurementId, line, flux, fluxError }));
  });
}

import { QueryTypes, type Transaction } from 'sequelize';
import type { Confidence } from '$lib/domain/confidence';
import type { Instrument } from '$lib/domain/instrument';
import type { Measurement } from '$lib/domain/measurement';
import { database } from '../connection';
import { identifierWithin, newIdentifier } from '../identifier';
import { CURRENT_MEASUREMENT } from './night-snapshot';

const select = { type: QueryTypes.SELECT } as const;
const parsed = <T>(value: T | string): T => (typeof value === 'string' ? (JSON.parse(value) as T) : value);

/** For use inside a query with spectra as `s`: it is none of those with a known answer, which count nowhere but in review. */
export const NOT_PLANTED = `NOT EXISTS (SELECT 1 FROM planted_spectra pl WHERE pl.spectrum_id = s.id)`;

/** As above, for files as `f`. */
export const NOT_PLANTED_FILE = `NOT EXISTS (SELECT 1 FROM spectra ps JOIN planted_spectra pl ON pl.spectrum_id = ps.id
  WHERE ps.file_id = f.id)`;

/** A night at rest of a programme that plants, with how many of its spectra are measured and how many are planted. */
export interface NightToPlant {
  nightId: string;
  programmeId: string;
  plantedRate: number;
  measured: number;
  planted: number;
}

export async function nightsToPlant(): Promise<NightToPlant[]> {
  const rows = await database().query<NightToPlant>(
    `SELECT n.id AS nightId, n.programme_id AS programmeId, r.planted_rate AS plantedRate, COUNT(s.id) AS measured,
        (SELECT COUNT(*) FROM planted_spectra pl WHERE pl.night_id = n.id) AS planted
      FROM review_settings r JOIN nights n ON n.programme_id = r.programme_id JOIN night_files nf ON nf.night_id = n.id
      JOIN spectra s ON s.file_id = nf.file_id AND s.state = 'measured'
      WHERE r.planted_rate > 0 AND NOT EXISTS (SELECT 1 FROM night_files x JOIN files f ON f.id = x.file_id
          WHERE x.night_id = n.id AND f.state = 'waiting')
        AND NOT EXISTS (SELECT 1 FROM night_files x JOIN spectra y ON y.file_id = x.file_id
          WHERE x.night_id = n.id AND y.state = 'waiting')
      GROUP BY n.id, r.programme_id ORDER BY n.id DESC`,
    select,
  );
  return rows.map((row) => ({ ...row, measured: Number(row.measured), planted: Number(row.planted) }));
}

/** A measured spectrum of a night that a planted one can be made from. */
export interface DonorRow {
  id: string;
  name: string;
  originalName: string;
  sha256: string;
  extension: number;
  rowIndex: number;
  /** The version that its current measurement was made by. */
  instrumentId: string | null;
  instrument: Instrument | null;
  measurement: Measurement;
}

/** Spectra of a night that have a name and were measured by this version of the engine, in the order of ids. */
export async function donorsOf(nightId: string, engineVersion: string): Promise<{ id: string; name: string }[]> {
  return database().query(
    `SELECT s.id, s.name FROM night_files nf JOIN spectra s ON s.file_id = nf.file_id
      JOIN measurements m ON m.spectrum_id = s.id AND ${CURRENT_MEASUREMENT}
      WHERE nf.night_id = :nightId AND s.state = 'measured' AND s.name IS NOT NULL AND m.engine_version = :engineVersion
      ORDER BY s.id`,
    { replacements: { nightId, engineVersion }, ...select },
  );
}

export async function readDonor(id: string): Promise<DonorRow> {
  const [row] = await database().query<DonorRow & { instrument: string | Instrument | null }>(
    `SELECT s.id, s.name, f.original_name AS originalName, f.sha256, s.extension,
        s.row_index AS rowIndex, COALESCE(m.instrument_id, f.instrument_id) AS instrumentId, i.description AS instrument, m.detail AS measurement
      FROM spectra s JOIN files f ON f.id = s.file_id JOIN measurements m ON m.spectrum_id = s.id AND ${CURRENT_MEASUREMENT}
      LEFT JOIN instruments i ON i.id = COALESCE(m.instrument_id, f.instrument_id) WHERE s.id = :id`,
    { replacements: { id }, ...select },
  );
  return { ...row, instrument: parsed(row.instrument), measurement: parsed(row.measurement) };
}

/** Names that targets and spectra of a programme bear. */
export async function namesTaken(programmeId: string): Promise<Set<string>> {
  const rows = await database().query<{ name: string }>(
    `SELECT s.name FROM files f JOIN spectra s ON s.file_id = f.id WHERE f.programme_id = :programmeId AND s.name IS NOT NULL
      UNION SELECT t.name FROM targets t WHERE t.programme_id = :programmeId`,
    { replacements: { programmeId }, ...select },
  );
  return new Set(rows.map(({ name }) => name));
}

export interface NewPlanted {
  programmeId: string;
  nightId: string;
  place: number;
  donorId: string;
  seed: number;
  redshift: number | null;
  detail: { what: string; signalToNoise: number };
  name: string;
  fileName: string;
  sha256: string;
  sizeBytes: number;
  instrumentId: string | null;
  extension: number;
  row: number;
  pixelCount: number;
  wavelengthMin: number;
  wavelengthMax: number;
}

/**
 * Stores a planted spectrum beside its donor: a file in no night, without a target, its age and the order of its id those
 * of the night's own. Null where another worker has filled the place.
 */
export async function storePlanted(planted: NewPlanted, transaction: Transaction): Promise<string | null> {
  const { nightId, place, detail } = planted;
  const [night] = await database().query<{ taken: number; low: string; high: string }>(
    `SELECT (SELECT COUNT(*) FROM planted_spectra pl WHERE pl.night_id = n.id AND pl.place = :place) AS taken,
        (SELECT MIN(s.id) FROM night_files nf JOIN spectra s ON s.file_id = nf.file_id WHERE nf.night_id = n.id) AS low,
        (SELECT MAX(s.id) FROM night_files nf JOIN spectra s ON s.file_id = nf.file_id WHERE nf.night_id = n.id) AS high
      FROM nights n WHERE n.id = :nightId FOR UPDATE`,
    { replacements: { nightId, place }, transaction, ...select },
  );
  if (Number(night.taken) > 0) return null;
  const ids = { fileId: newIdentifier(), id: identifierWithin(night.low, night.high) };
  const replacements = { ...planted, ...ids, detail: JSON.stringify(detail) };
  const run = (sql: string) => database().query(sql, { replacements, transaction });
  await run(`INSERT INTO files (id, programme_id, sha256, size_bytes, original_name, instrument_id, state, problems)
    VALUES (:fileId, :programmeId, :sha256, :sizeBytes, :fileName, :instrumentId, 'read', '[]')`);
  await run(`INSERT INTO spectra (id, file_id, target_id, extension, row_index, name, exposure_seconds, pixel_count,
      wavelength_min, wavelength_max, header, state, created_at)
    SELECT :id, :fileId, NULL, :extension, :row, :name, d.exposure_seconds, :pixelCount, :wavelengthMin, :wavelengthMax,
      '{}', 'waiting', d.created_at FROM spectra d WHERE d.id = :donorId`);
  await run(`INSERT INTO planted_spectra (spectrum_id, programme_id, night_id, place, kind, redshift, donor_id, seed, detail)
    VALUES (:id, :programmeId, :nightId, :place, IF(:redshift IS NULL, 'empty', 'simulated'), :redshift, :donorId, :seed,
      :detail)`);
  return ids.id;
}

const BEHIND = `planted_spectra pl JOIN spectra s ON s.id = pl.spectrum_id AND s.state = 'measured'
  JOIN measurements m ON m.id = s.current_measurement_id
  JOIN spectra d ON d.id = pl.donor_id JOIN measurements dm ON dm.id = d.current_measurement_id
    AND (dm.engine_version <> m.engine_version OR dm.settings_hash <> m.settings_hash)
  LEFT JOIN measurements same ON same.spectrum_id = s.id AND same.engine_version = dm.engine_version
    AND same.settings_hash = dm.settings_hash`;

/**
 * Lets the current answers on planted spectra follow those on their donors, by engine and instrument: an old version's name
 * would give them away. What lacks such an answer is to be measured anew where this engine can give it, once a day at most;
 * returns the ids, at most 50.
 */
export async function followDonors(engineVersion: string, transaction: Transaction): Promise<string[]> {
  await database().query(`UPDATE ${BEHIND} SET s.current_measurement_id = same.id WHERE same.id IS NOT NULL`, {
    transaction,
  });
  const rows = await database().query<{ id: string; instrumentId: string | null }>(
    `SELECT s.id, dm.instrument_id AS instrumentId FROM ${BEHIND}
      WHERE same.id IS NULL AND dm.engine_version = :engineVersion
        AND m.created_at < UTC_TIMESTAMP(6) - INTERVAL 1 DAY ORDER BY s.id LIMIT 50`,
    { replacements: { engineVersion }, transaction, ...select },
  );
  for (const { id, instrumentId } of rows) {
    await database().query(
      `UPDATE spectra s JOIN files f ON f.id = s.file_id SET s.state = 'waiting', s.current_measurement_id = NULL,
          s.tries = 0, f.instrument_id = :instrumentId WHERE s.id = :id`,
      { replacements: { id, instrumentId }, transaction },
    );
  }
  return rows.map(({ id }) => id);
}

/** A verdict on a planted spectrum, with the known answer. */
export interface PlantedLookRow {
  id: string;
  spectrumId: string;
  userId: string;
  kind: string;
  redshift: number | null;
  confidence: Confidence | null;
  truth: number | null;
}

/** All that was said of a programme's planted spectra before a moment, oldest first. */
export function plantedLooks(programmeId: string, before: Date): Promise<PlantedLookRow[]> {
  return database().query<PlantedLookRow>(
    `SELECT w.id, w.spectrum_id AS spectrumId, w.user_id AS userId, w.kind, w.redshift, w.confidence, pl.redshift AS truth
      FROM planted_spectra pl JOIN verdicts w ON w.spectrum_id = pl.spectrum_id
      WHERE pl.programme_id = :programmeId AND w.created_at < :before ORDER BY w.id`,
    { replacements: { programmeId, before }, ...select },
  );
}

/** What the engine says of a programme's planted spectra that were measured before a moment. */
export function plantedAnswers(
  programmeId: string,
  before: Date,
): Promise<{ redshift: number | null; confidence: Confidence; truth: number | null }[]> {
  return database().query(
    `SELECT m.redshift, m.confidence, pl.redshift AS truth FROM planted_spectra pl JOIN spectra s ON s.id = pl.spectrum_id
      JOIN measurements m ON m.spectrum_id = s.id AND ${CURRENT_MEASUREMENT}
      WHERE pl.programme_id = :programmeId AND m.created_at < :before`,
    { replacements: { programmeId, before }, ...select },
  );
}

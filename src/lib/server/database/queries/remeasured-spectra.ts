import { QueryTypes, type Transaction } from 'sequelize';
import type { Instrument } from '$lib/domain/instrument';
import type { Measurement } from '$lib/domain/measurement';
import type { Problem } from '$lib/domain/problem';
import type { SpectrumSummary } from '$lib/domain/spectrum-summary';
import { database } from '../connection';
import { SpectrumRecord } from '../models/observing';
import { insertMeasurements } from './measurements';

const select = { type: QueryTypes.SELECT } as const;

export interface SpectrumToRemeasure {
  id: string;
  fileId: string;
  extension: number;
  rowIndex: number;
  sha256: string;
  originalName: string;
  instrumentId: string | null;
  instrument: Instrument | null;
}

/** Counts a try before it is made; returns the largest count. */
export async function countRemeasureTry(remeasureId: string, spectrumIds: string[]): Promise<number> {
  const replacements = { remeasureId, spectrumIds };
  await database().query(
    `UPDATE remeasured_spectra SET tries = LEAST(tries + 1, 100)
      WHERE remeasure_id = :remeasureId AND spectrum_id IN (:spectrumIds)`,
    { replacements },
  );
  const [row] = await database().query<{ tries: number | null }>(
    `SELECT MAX(tries) AS tries FROM remeasured_spectra
      WHERE remeasure_id = :remeasureId AND spectrum_id IN (:spectrumIds)`,
    { replacements, ...select },
  );
  return Number(row.tries ?? 0);
}

/** Of these spectra, those that still wait in the re-measure, those of a file together. */
export async function findToRemeasure(remeasureId: string, spectrumIds: string[]): Promise<SpectrumToRemeasure[]> {
  const rows = await database().query<SpectrumToRemeasure & { instrument: string | Instrument | null }>(
    `SELECT s.id, s.file_id AS fileId, s.extension, s.row_index AS rowIndex, f.sha256, f.original_name AS originalName,
        f.instrument_id AS instrumentId, i.description AS instrument
      FROM remeasured_spectra r JOIN spectra s ON s.id = r.spectrum_id JOIN files f ON f.id = s.file_id
      LEFT JOIN instruments i ON i.id = f.instrument_id
      WHERE r.remeasure_id = :remeasureId AND r.spectrum_id IN (:spectrumIds) AND r.state = 'waiting'
      ORDER BY s.file_id, s.extension, s.row_index`,
    { replacements: { remeasureId, spectrumIds }, ...select },
  );
  return rows.map((row) => ({
    ...row,
    instrument: typeof row.instrument === 'string' ? (JSON.parse(row.instrument) as Instrument) : row.instrument,
  }));
}

/** What measuring a spectrum again brought. */
export interface RemeasuredSpectrum {
  id: string;
  instrumentId: string | null;
  outcome: { measurement: Measurement; summary: SpectrumSummary } | { problem: Problem };
}

/** Of these spectra, those that wait still, held until the transaction ends: a cancelled one takes no result. */
async function holdWaiting(remeasureId: string, ids: string[], transaction: Transaction): Promise<Set<string>> {
  const rows = await database().query<{ id: string }>(
    `SELECT spectrum_id AS id FROM remeasured_spectra
      WHERE remeasure_id = :remeasureId AND spectrum_id IN (:ids) AND state = 'waiting' FOR UPDATE`,
    { replacements: { remeasureId, ids }, ...select, transaction },
  );
  return new Set(rows.map(({ id }) => id));
}

/**
 * Writes what measuring again brought, beside what was there: the current measurement of a spectrum stays, except where
 * there was none. What the reading says of a spectrum (range, signal-to-noise, sky-line check) is brought up to date.
 */
export async function storeRemeasured(
  remeasureId: string,
  results: RemeasuredSpectrum[],
  transaction: Transaction,
): Promise<void> {
  if (results.length === 0) return;
  const ids = results.map(({ id }) => id);
  const waiting = await holdWaiting(remeasureId, ids, transaction);
  const measured: { id: string; instrumentId: string | null; measurement: Measurement }[] = [];
  for (const { id, instrumentId, outcome } of results.filter((result) => waiting.has(result.id))) {
    if ('problem' in outcome) {
      await database().query(
        `UPDATE remeasured_spectra SET state = 'failed', problem = :problem
          WHERE remeasure_id = :remeasureId AND spectrum_id = :id`,
        { replacements: { remeasureId, id, problem: JSON.stringify(outcome.problem) }, transaction },
      );
      continue;
    }
    measured.push({ id, instrumentId, measurement: outcome.measurement });
    const { pixelCount, wavelengthMin, wavelengthMax, medianSignalToNoise, summary } = {
      ...outcome.summary,
      ...outcome,
    };
    const sky = { skyOffsetKms: summary.skyOffsetKms ?? null, skyScatterKms: summary.skyScatterKms ?? null };
    const reading = { pixelCount, wavelengthMin, wavelengthMax, medianSignalToNoise, ...sky };
    await SpectrumRecord.update(reading, { where: { id }, transaction });
  }
  if (measured.length === 0) return;
  const rows = measured.map(({ id: spectrumId, ...rest }) => ({ spectrumId, ...rest }));
  await insertMeasurements(rows, transaction);
  for (const { id, measurement } of measured) {
    const { version, settings } = measurement.engine;
    await database().query(
      `UPDATE remeasured_spectra r JOIN measurements m ON m.spectrum_id = r.spectrum_id
          AND m.engine_version = :version AND m.settings_hash = :settings
        SET r.after_id = m.id, r.state = IF(m.id <=> r.before_id, 'skipped', 'measured')
        WHERE r.remeasure_id = :remeasureId AND r.spectrum_id = :id`,
      { replacements: { remeasureId, id, version, settings }, transaction },
    );
  }
  await database().query(
    `UPDATE spectra s JOIN remeasured_spectra r ON r.spectrum_id = s.id AND r.remeasure_id = :remeasureId
      SET s.current_measurement_id = r.after_id, s.state = 'measured', s.problem = NULL
      WHERE s.id IN (:ids) AND s.current_measurement_id IS NULL AND r.after_id IS NOT NULL`,
    { replacements: { remeasureId, ids: measured.map(({ id }) => id) }, transaction },
  );
}

/** The problems of spectra that a re-measure set aside, at most 200; their older measurements stand. */
export async function remeasureProblems(
  remeasureId: string,
): Promise<{ spectrum: string; file: string; problem: Problem }[]> {
  const rows = await database().query<{ spectrum: string; file: string; problem: string | Problem }>(
    `SELECT s.id AS spectrum, f.original_name AS file, r.problem FROM remeasured_spectra r
      JOIN spectra s ON s.id = r.spectrum_id JOIN files f ON f.id = s.file_id
      WHERE r.remeasure_id = :remeasureId AND r.state = 'failed' ORDER BY s.id LIMIT 200`,
    { replacements: { remeasureId }, ...select },
  );
  return rows.map((row) => ({
    ...row,
    problem: typeof row.problem === 'string' ? (JSON.parse(row.problem) as Problem) : row.problem,
  }));
}

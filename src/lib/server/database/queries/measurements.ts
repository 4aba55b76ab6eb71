import { QueryTypes, type Transaction } from 'sequelize';
import type { Instrument } from '$lib/domain/instrument';
import type { LineFit, Measurement } from '$lib/domain/measurement';
import type { MeasureResult } from '$lib/domain/measure-result';
import { database } from '../connection';
import { newIdentifier } from '../identifier';
import { CandidateRecord, LineFitRecord, MeasurementRecord } from '../models/answers';
import { SpectrumRecord } from '../models/observing';

export interface WaitingSpectrum {
  id: string;
  fileId: string;
  extension: number;
  rowIndex: number;
  sha256: string;
  originalName: string;
  instrumentId: string | null;
  instrument: Instrument | null;
}

/** Of these spectra, those not measured or set aside yet, in order of file and row. */
export async function findWaiting(ids: string[]): Promise<WaitingSpectrum[]> {
  const rows = await database().query<WaitingSpectrum>(
    `SELECT s.id, s.file_id AS fileId, s.extension, s.row_index AS rowIndex, f.sha256, f.original_name AS originalName,
        f.instrument_id AS instrumentId, i.description AS instrument
      FROM spectra s JOIN files f ON f.id = s.file_id LEFT JOIN instruments i ON i.id = f.instrument_id
      WHERE s.id IN (:ids) AND s.state = 'waiting' ORDER BY f.id, s.extension, s.row_index`,
    { replacements: { ids }, type: QueryTypes.SELECT },
  );
  return rows.map((row) => ({
    ...row,
    instrument: typeof row.instrument === 'string' ? (JSON.parse(row.instrument) as Instrument) : row.instrument,
  }));
}

/** Shannon entropy of candidates and rivals, bits; what is left of the sum counts as one more answer. */
export function entropyBits({ candidates, rivals }: Pick<Measurement, 'candidates' | 'rivals'>): number {
  const shares = [...candidates.map((c) => c.probability), rivals.nothing ?? 0, rivals.star ?? 0, rivals.passive ?? 0];
  shares.push(Math.max(0, 1 - shares.reduce((sum, p) => sum + p, 0)));
  return shares.reduce((sum, p) => (p > 0 ? sum - p * Math.log2(p) : sum), 0);
}

/** A measurement to be written, and the version of the instrument that its spectrum was read by. */
export interface NewMeasurement {
  spectrumId: string;
  instrumentId: string | null;
  measurement: Measurement;
}

/**
 * Writes results, with the version of the instrument that each spectrum was read by; a spectrum whose measurement by this engine and settings stands already
 * keeps it. The first measurement of a spectrum becomes its current one.
 */
export async function storeMeasurements(
  results: ReadonlyMap<string, MeasureResult>,
  transaction: Transaction,
  instruments: ReadonlyMap<string, string | null> = new Map(),
): Promise<void> {
  const measured: NewMeasurement[] = [];
  for (const [spectrumId, result] of results) {
    if ('measurement' in result) {
      measured.push({ spectrumId, instrumentId: instruments.get(spectrumId) ?? null, measurement: result.measurement });
    } else {
      const where = { id: spectrumId, state: 'waiting' };
      await SpectrumRecord.update({ state: 'failed', problem: result.problem }, { where, transaction });
    }
  }
  if (measured.length === 0) return;
  await insertMeasurements(measured, transaction);
  await database().query(
    `UPDATE spectra s SET s.state = 'measured', s.problem = NULL, s.current_measurement_id = COALESCE(
        s.current_measurement_id, (SELECT MAX(m.id) FROM measurements m WHERE m.spectrum_id = s.id))
      WHERE s.id IN (:ids)`,
    { replacements: { ids: measured.map(({ spectrumId }) => spectrumId) }, transaction },
  );
}

/** Writes measurements with their candidates and lines beside what is there; those that stand already are passed over. */
export async function insertMeasurements(inputs: NewMeasurement[], transaction: Transaction): Promise<void> {
  const measured = inputs.map((input) => ({ ...input, id: newIdentifier() }));
  await MeasurementRecord.bulkCreate(measured.map(asRow), { ignoreDuplicates: true, transaction });
  const ids = measured.map(({ id }) => id);
  const written = await MeasurementRecord.findAll({ where: { id: ids }, attributes: ['id'], raw: true, transaction });
  const isNew = new Set(written.map(({ id }) => id));
  const fresh = measured.filter(({ id }) => isNew.has(id));
  const candidates = fresh.flatMap(({ id, measurement }) =>
    measurement.candidates.map(({ redshift, redshiftError, probability, objectClass }, place) => {
      return { measurementId: id, place, redshift, redshiftError, probability, objectClass };
    }),
  );
  const lines = fresh.flatMap(({ id, measurement }) =>
    measurement.lines.map((line, i, all) => {
      const component = all.slice(0, i).filter((other) => other.line === line.line).length;
      return { measurementId: id, component, ...line };
    }),
  );
  if (candidates.length) await CandidateRecord.bulkCreate(candidates, { transaction });
  if (lines.length) await LineFitRecord.bulkCreate(lines, { transaction });
}

function asRow({ id, spectrumId, instrumentId, measurement }: NewMeasurement & { id: string }) {
  const { engine, candidates, lines, redshift, redshiftError, redshiftErrorMeasured, redshiftSystemic } = measurement;
  const { secondRedshift, probability, confidence, noiseFactor, fluxUnit, flags } = measurement;
  // Tied doublets share a signal-to-noise ratio: the brighter of them names the feature.
  const strength = (line: LineFit) => [line.signalToNoise ?? 0, line.flux ?? 0];
  const stronger = (best: LineFit | null, line: LineFit) => {
    if (!best) return line;
    const [[a, fluxA], [b, fluxB]] = [strength(line), strength(best)];
    return a > b || (a === b && fluxA > fluxB) ? line : best;
  };
  const strongest = lines.reduce<LineFit | null>(stronger, null);
  return {
    id,
    spectrumId,
    instrumentId,
    engineVersion: engine.version,
    settingsHash: engine.settings,
    lineList: engine.lineList,
    redshift,
    redshiftError,
    redshiftErrorMeasured,
    redshiftSystemic,
    secondRedshift,
    probability,
    confidence,
    noiseFactor,
    entropyBits: entropyBits(measurement),
    objectClass: redshift === null ? null : (candidates[0]?.objectClass ?? null),
    fluxUnit,
    flags,
    strongestLine: strongest?.line ?? null,
    strongestLineSignalToNoise: strongest?.signalToNoise ?? null,
    detail: measurement,
  };
}

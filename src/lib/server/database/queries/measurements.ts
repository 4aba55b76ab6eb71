import { QueryTypes, type Transaction } from 'sequelize';
import type { Instrument } from '$lib/domain/instrument';
import type { LineFit, Measurement } from '$lib/domain/measurement';
import type { Problem } from '$lib/domain/problem';
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
  instrument: Instrument | null;
}

/** Of these spectra, those not measured or set aside yet, in order of file and row. */
export async function findWaiting(ids: string[]): Promise<WaitingSpectrum[]> {
  const rows = await database().query<WaitingSpectrum>(
    `SELECT s.id, s.file_id AS fileId, s.extension, s.row_index AS rowIndex, f.sha256, f.original_name AS originalName,
        i.description AS instrument
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

/** Writes results; a spectrum whose measurement by this engine and settings stands already keeps it. */
export async function storeMeasurements(
  results: Map<string, { measurement: Measurement } | { problem: Problem }>,
  transaction: Transaction,
): Promise<void> {
  for (const [spectrumId, result] of results) {
    if ('problem' in result) {
      const where = { id: spectrumId, state: 'waiting' };
      await SpectrumRecord.update({ state: 'failed', problem: result.problem }, { where, transaction });
    } else {
      await storeMeasurement(spectrumId, result.measurement, transaction);
      await SpectrumRecord.update({ state: 'measured', problem: null }, { where: { id: spectrumId }, transaction });
    }
  }
}

function strongestOf(lines: LineFit[]): LineFit | null {
  const stronger = (best: LineFit | null, line: LineFit) =>
    (line.signalToNoise ?? 0) > (best?.signalToNoise ?? 0) ? line : best;
  return lines.reduce(stronger, null);
}

async function storeMeasurement(spectrumId: string, measurement: Measurement, transaction: Transaction): Promise<void> {
  const { engine, candidates, lines } = measurement;
  const found = await MeasurementRecord.findOne({
    where: { spectrumId, engineVersion: engine.version, settingsHash: engine.settings },
    attributes: ['id'],
    transaction,
  });
  if (found) return;
  const id = newIdentifier();
  const strongest = strongestOf(lines);
  const { redshift, redshiftError, redshiftErrorMeasured, redshiftSystemic, secondRedshift } = measurement;
  const { probability, confidence, noiseFactor } = measurement;
  await MeasurementRecord.create(
    {
      id,
      spectrumId,
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
      fluxUnit: measurement.fluxUnit,
      flags: measurement.flags,
      strongestLine: strongest?.line ?? null,
      strongestLineSignalToNoise: strongest?.signalToNoise ?? null,
      detail: measurement,
    },
    { transaction },
  );
  await CandidateRecord.bulkCreate(
    candidates.map((candidate, place) => ({ measurementId: id, place, ...candidate })),
    { transaction, fields: ['measurementId', 'place', 'redshift', 'redshiftError', 'probability', 'objectClass'] },
  );
  await LineFitRecord.bulkCreate(
    lines.map((line) => ({ measurementId: id, ...line })),
    { transaction },
  );
}

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
export async function storeMeasurements(results: Map<string, MeasureResult>, transaction: Transaction): Promise<void> {
  const measured: { id: string; spectrumId: string; measurement: Measurement }[] = [];
  for (const [spectrumId, result] of results) {
    if ('measurement' in result) measured.push({ id: newIdentifier(), spectrumId, measurement: result.measurement });
    else {
      const where = { id: spectrumId, state: 'waiting' };
      await SpectrumRecord.update({ state: 'failed', problem: result.problem }, { where, transaction });
    }
  }
  if (measured.length === 0) return;
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
  const where = { id: measured.map(({ spectrumId }) => spectrumId) };
  await SpectrumRecord.update({ state: 'measured', problem: null }, { where, transaction });
}

function asRow({ id, spectrumId, measurement }: { id: string; spectrumId: string; measurement: Measurement }) {
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

import { QueryTypes, type Transaction } from 'sequelize';
import type { Instrument } from '$lib/domain/instrument';
import type { Problem } from '$lib/domain/problem';
import { zoneOf } from '$lib/domain/sky';
import type { FileContent, SpectrumSummary } from '$lib/domain/spectrum-summary';
import { database } from '../connection';
import { InstrumentVersion, SpectrumFile, SpectrumRecord, Target } from '../models/observing';

export interface StoredFile {
  id: string;
  programmeId: string;
  sha256: string;
  originalName: string;
  state: string;
  instrument: Instrument | null;
}

export async function findFile(id: string): Promise<StoredFile | null> {
  database();
  const file = await SpectrumFile.findByPk(id);
  if (!file) return null;
  const version = file.instrumentId ? await InstrumentVersion.findByPk(file.instrumentId) : null;
  const { programmeId, sha256, originalName, state } = file;
  return { id, programmeId, sha256, originalName, state, instrument: version?.description ?? null };
}

/** Counts a try before it is made, so that one which takes the process down is counted too; returns the largest count. */
export async function countTry(table: 'files' | 'spectra', ids: string[]): Promise<number> {
  await database().query(`UPDATE ${table} SET tries = LEAST(tries + 1, 100) WHERE id IN (:ids)`, {
    replacements: { ids },
  });
  const [row] = await database().query<{ tries: number | null }>(
    `SELECT MAX(tries) AS tries FROM ${table} WHERE id IN (:ids)`,
    { replacements: { ids }, type: QueryTypes.SELECT },
  );
  return Number(row.tries ?? 0);
}

export async function markFileFailed(id: string, problems: Problem[], transaction: Transaction): Promise<void> {
  await SpectrumFile.update({ state: 'failed', problems }, { where: { id, state: 'waiting' }, transaction });
}

/** The target a spectrum shows: by name within the programme, made where there is none. */
async function targetOf(
  programmeId: string,
  summary: SpectrumSummary,
  fallbackName: string,
  transaction: Transaction,
): Promise<string> {
  const name = (summary.name ?? fallbackName).slice(0, 200);
  const { raDegrees, decDegrees } = summary;
  const zone = decDegrees === null ? null : zoneOf(decDegrees);
  const [target] = await Target.findOrCreate({
    where: { programmeId, name },
    defaults: { programmeId, name, raDegrees, decDegrees, zone } as never,
    transaction,
  });
  return target.id;
}

/**
 * Writes what reading brought: spectra (none twice: file, extension and row are unique), problems, the file's state.
 * Returns the ids of the spectra in the order of the file.
 */
export async function storeFileContent(
  file: StoredFile,
  content: FileContent,
  transaction: Transaction,
): Promise<string[]> {
  const ids: string[] = [];
  for (const summary of content.spectra) {
    const targetId = await targetOf(file.programmeId, summary, file.originalName, transaction);
    const { extension, row, header, warnings, ...rest } = summary;
    const [spectrum] = await SpectrumRecord.findOrCreate({
      where: { fileId: file.id, extension, rowIndex: row },
      defaults: {
        ...rest,
        fileId: file.id,
        targetId,
        extension,
        rowIndex: row,
        header: { ...header, ...(warnings.length && { 'Farglow warnings': warnings.join('; ') }) },
      } as never,
      transaction,
    });
    ids.push(spectrum.id);
  }
  const state = content.spectra.length ? 'read' : 'failed';
  await SpectrumFile.update({ state, problems: content.problems }, { where: { id: file.id }, transaction });
  return ids;
}

import { QueryTypes, type Transaction } from 'sequelize';
import type { Instrument } from '$lib/domain/instrument';
import type { Problem } from '$lib/domain/problem';
import type { FileContent } from '$lib/domain/spectrum-summary';
import { database } from '../connection';
import { newIdentifier } from '../identifier';
import { SpectrumFile, SpectrumRecord } from '../models/observing';
import { linkCombinations } from './combinations';
import { exposureKey, linkExposures } from './exposures';
import { placeSpectra } from './place-spectra';

export interface StoredFile {
  id: string;
  programmeId: string;
  sha256: string;
  originalName: string;
  instrumentId: string | null;
  instrument: Instrument | null;
}

/** Of these files, those that are not read or set aside yet. */
export async function findWaitingFiles(ids: string[]): Promise<StoredFile[]> {
  const rows = await database().query<Omit<StoredFile, 'instrument'> & { instrument: string | Instrument | null }>(
    `SELECT f.id, f.programme_id AS programmeId, f.sha256, f.original_name AS originalName,
        f.instrument_id AS instrumentId, i.description AS instrument
      FROM files f LEFT JOIN instruments i ON i.id = f.instrument_id
      WHERE f.id IN (:ids) AND f.state = 'waiting' ORDER BY f.id`,
    { replacements: { ids }, type: QueryTypes.SELECT },
  );
  return rows.map((row) => ({
    ...row,
    instrument: typeof row.instrument === 'string' ? (JSON.parse(row.instrument) as Instrument) : row.instrument,
  }));
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

export async function markFilesFailed(
  failed: [id: string, problem: Problem][],
  transaction: Transaction,
): Promise<void> {
  for (const [id, problem] of failed) {
    await SpectrumFile.update(
      { state: 'failed', problems: [problem] },
      { where: { id, state: 'waiting' }, transaction },
    );
  }
}

type Entry = { file: StoredFile; content: FileContent };

/**
 * Writes what reading brought: spectra (none twice: file, extension and row are unique), problems, the files' states.
 * Returns for each entry the ids of its spectra in the order of the file.
 */
export async function storeFileContents(entries: Entry[], transaction: Transaction): Promise<string[][]> {
  if (entries.length === 0) return [];
  const ids = new Map<string, string>();
  const key = (fileId: string, extension: number, row: number) => `${fileId} ${extension} ${row}`;
  for (const group of byProgramme(entries)) {
    const placed = await placeSpectra(group, transaction);
    let place = 0;
    const rows = group.flatMap(({ file, content }) =>
      content.spectra.map(({ extension, row, header, warnings, ...rest }) => ({
        ...rest,
        id: newIdentifier(),
        fileId: file.id,
        ...placed[place++],
        exposureKey: exposureKey(rest, header, file.instrument?.name),
        kind: isStack(header) ? 'stack' : 'exposure',
        extension,
        rowIndex: row,
        header: { ...header, ...(warnings.length && { 'Farglow warnings': warnings.join('; ') }) },
      })),
    );
    if (rows.length) await SpectrumRecord.bulkCreate(rows as never[], { ignoreDuplicates: true, transaction });
    const where = { fileId: group.map(({ file }) => file.id) };
    const attributes = ['id', 'fileId', 'extension', 'rowIndex'];
    for (const found of await SpectrumRecord.findAll({ where, attributes, raw: true, transaction })) {
      ids.set(key(found.fileId, found.extension, found.rowIndex), found.id);
    }
    await linkCombinations(where.fileId, transaction);
    await linkExposures([...new Set(placed.map(({ targetId }) => targetId))], transaction);
    await settleFiles(group, transaction);
  }
  return entries.map(({ file, content }) =>
    content.spectra.map(({ extension, row }) => ids.get(key(file.id, extension, row))!),
  );
}

/** Writes the files' states: in one statement for all that were read without a word, one by one for the others. */
async function settleFiles(group: Entry[], transaction: Transaction): Promise<void> {
  const isPlain = ({ content }: Entry) => content.spectra.length > 0 && !content.shape && content.problems.length === 0;
  const plain = group.filter(isPlain).map(({ file }) => file.id);
  if (plain.length) {
    const settled = { state: 'read' as const, shape: null, problems: [] };
    await SpectrumFile.update(settled, { where: { id: plain }, transaction });
  }
  for (const { file, content } of group.filter((entry) => !isPlain(entry))) {
    const unread = content.shape ? 'needs assignment' : 'failed';
    const state = content.spectra.length ? 'read' : unread;
    const shape = content.shape ?? null;
    await SpectrumFile.update({ state, shape, problems: content.problems }, { where: { id: file.id }, transaction });
  }
}

/** Makes the targets that these files show and that are not there yet; `storeFileContents` finds them then. */
export async function knowTargets(entries: Entry[], transaction: Transaction): Promise<void> {
  for (const group of byProgramme(entries)) await placeSpectra(group, transaction);
}

/** True where the header counts more than one exposure in it (common practice, no source). */
const isStack = (header: Record<string, unknown>) => Number(header.NEXPOSUR ?? header.NCOMBINE ?? 1) > 1;

function byProgramme(entries: Entry[]): Entry[][] {
  const groups = new Map<string, Entry[]>();
  for (const entry of entries) {
    const { programmeId } = entry.file;
    groups.set(programmeId, [...(groups.get(programmeId) ?? []), entry]);
  }
  return [...groups.values()];
}

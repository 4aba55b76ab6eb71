import { QueryTypes, type Transaction } from 'sequelize';
import type { Instrument } from '$lib/domain/instrument';
import type { Problem } from '$lib/domain/problem';
import { zoneOf } from '$lib/domain/sky';
import type { FileContent, SpectrumSummary } from '$lib/domain/spectrum-summary';
import { database } from '../connection';
import { newIdentifier } from '../identifier';
import { SpectrumFile, SpectrumRecord, Target } from '../models/observing';

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

const targetName = (summary: SpectrumSummary, file: StoredFile) => (summary.name ?? file.originalName).slice(0, 200);

/** Ids of the targets that these spectra show, by name, made where there are none; all entries are of one programme. */
async function targetsOf(entries: Entry[], transaction: Transaction): Promise<Map<string, string>> {
  const wanted = new Map<string, SpectrumSummary>();
  for (const { file, content } of entries)
    for (const summary of content.spectra) wanted.set(targetName(summary, file), summary);
  if (wanted.size === 0) return new Map();
  const { programmeId } = entries[0].file;
  // In one order everywhere, so that two workers wait for each other instead of locking each other out.
  const names = [...wanted.keys()].sort();
  const rows = names.map((name) => {
    const { raDegrees, decDegrees } = wanted.get(name)!;
    const zone = decDegrees === null ? null : zoneOf(decDegrees);
    return { id: newIdentifier(), programmeId, name, raDegrees, decDegrees, zone };
  });
  await Target.bulkCreate(rows, { ignoreDuplicates: true, transaction });
  const found = await Target.findAll({
    where: { programmeId, name: names },
    attributes: ['id', 'name'],
    raw: true,
    transaction,
  });
  return new Map(found.map(({ id, name }) => [name, id]));
}

/**
 * Writes what reading brought: spectra (none twice: file, extension and row are unique), problems, the files' states.
 * Returns for each entry the ids of its spectra in the order of the file.
 */
export async function storeFileContents(entries: Entry[], transaction: Transaction): Promise<string[][]> {
  if (entries.length === 0) return [];
  const ids = new Map<string, string>();
  const key = (fileId: string, extension: number, row: number) => `${fileId} ${extension} ${row}`;
  for (const group of byProgramme(entries)) {
    const targets = await targetsOf(group, transaction);
    const rows = group.flatMap(({ file, content }) =>
      content.spectra.map(({ extension, row, header, warnings, ...rest }) => ({
        ...rest,
        id: newIdentifier(),
        fileId: file.id,
        targetId: targets.get((rest.name ?? file.originalName).slice(0, 200)) ?? null,
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
    for (const { file, content } of group) {
      const state = content.spectra.length ? 'read' : 'failed';
      await SpectrumFile.update({ state, problems: content.problems }, { where: { id: file.id }, transaction });
    }
  }
  return entries.map(({ file, content }) =>
    content.spectra.map(({ extension, row }) => ids.get(key(file.id, extension, row))!),
  );
}

function byProgramme(entries: Entry[]): Entry[][] {
  const groups = new Map<string, Entry[]>();
  for (const entry of entries) {
    const { programmeId } = entry.file;
    groups.set(programmeId, [...(groups.get(programmeId) ?? []), entry]);
  }
  return [...groups.values()];
}

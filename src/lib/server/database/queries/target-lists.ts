import { QueryTypes, type Transaction } from 'sequelize';
import type { TargetListReport } from '$lib/domain/target-list';
import { zoneOf } from '$lib/domain/sky';
import { database } from '../connection';
import { newIdentifier } from '../identifier';

/** A row of a list with the target it is. */
export interface PlacedEntry {
  row: number;
  targetId: string;
  name: string;
  raDegrees: number | null;
  decDegrees: number | null;
  priority: number | null;
  magnitudes: Record<string, number>;
}

/** Rows written by one statement. */
const CHUNK = 1000;

const ENTRY_COLUMNS = `(list_id, row_index, target_id, name, ra_degrees, dec_degrees, priority, magnitude, magnitude_band,
  magnitudes)`;

/** Stores a list with its entries; returns its id. */
export async function insertTargetList(
  list: { programmeId: string; name: string; createdBy: string },
  entries: readonly PlacedEntry[],
  transaction: Transaction,
): Promise<string> {
  const id = newIdentifier();
  await database().query(
    `INSERT INTO target_lists (id, programme_id, name, row_count, notes, created_by)
      VALUES (:id, :programmeId, :name, :rows, '{}', :createdBy)`,
    { replacements: { id, ...list, rows: entries.length }, transaction },
  );
  for (let i = 0; i < entries.length; i += CHUNK) {
    const rows = entries.slice(i, i + CHUNK).map((entry) => {
      const [first] = Object.entries(entry.magnitudes);
      const { row, targetId, name, raDegrees, decDegrees, priority, magnitudes } = entry;
      const magnitude = first ? [first[1], first[0].slice(0, 60)] : [null, null];
      return [id, row, targetId, name, raDegrees, decDegrees, priority, ...magnitude, JSON.stringify(magnitudes)];
    });
    await database().query(`INSERT INTO target_entries ${ENTRY_COLUMNS} VALUES :rows`, {
      replacements: { rows },
      transaction,
    });
  }
  return id;
}

export async function keepReport(listId: string, report: TargetListReport, transaction: Transaction): Promise<void> {
  await database().query('UPDATE target_lists SET notes = :notes WHERE id = :listId', {
    replacements: { listId, notes: JSON.stringify(report) },
    transaction,
  });
}

/** Gives targets the name, place and priority that their list has; a priority that the list leaves out stays. */
export async function applyEntries(entries: readonly PlacedEntry[], transaction: Transaction): Promise<void> {
  for (let i = 0; i < entries.length; i += CHUNK) {
    const rows = entries.slice(i, i + CHUNK).map(({ targetId, name, raDegrees, decDegrees, priority }) => ({
      targetId,
      name,
      ra: raDegrees,
      dec: decDegrees,
      zone: decDegrees === null ? null : zoneOf(decDegrees),
      priority,
    }));
    await database().query(
      `UPDATE targets t JOIN JSON_TABLE(:rows, '$[*]' COLUMNS (id CHAR(36) PATH '$.targetId', name VARCHAR(200) PATH '$.name',
          ra DOUBLE PATH '$.ra', \`dec\` DOUBLE PATH '$.dec', zone INT PATH '$.zone', priority DOUBLE PATH '$.priority')) e
          ON t.id = CAST(e.id AS UUID)
        SET t.name = e.name, t.is_listed = TRUE, t.priority = COALESCE(e.priority, t.priority),
          t.ra_degrees = COALESCE(e.ra, t.ra_degrees), t.dec_degrees = COALESCE(e.\`dec\`, t.dec_degrees),
          t.zone = COALESCE(e.zone, t.zone)`,
      { replacements: { rows: JSON.stringify(rows) }, transaction },
    );
  }
}

/** Takes targets off the lists: a newer list has their name elsewhere. */
export async function unlistTargets(ids: readonly string[], transaction: Transaction): Promise<void> {
  if (ids.length === 0) return;
  await database().query('UPDATE targets SET is_listed = FALSE WHERE id IN (:ids)', {
    replacements: { ids },
    transaction,
  });
}

/** Makes a target that had no place one with another; its spectra, names and entries go over. */
export async function mergeTarget(fromId: string, intoId: string, transaction: Transaction): Promise<void> {
  const options = { replacements: { fromId, intoId }, transaction };
  await database().query('UPDATE spectra SET target_id = :intoId WHERE target_id = :fromId', options);
  await database().query('UPDATE target_entries SET target_id = :intoId WHERE target_id = :fromId', options);
  await database().query('UPDATE combinations SET target_id = :intoId WHERE target_id = :fromId', options);
  await database().query('UPDATE IGNORE target_names SET target_id = :intoId WHERE target_id = :fromId', options);
  await database().query('DELETE FROM target_names WHERE target_id = :fromId', options);
  await database().query('DELETE FROM targets WHERE id = :fromId', options);
}

/** Which of these targets spectra show. */
export async function shownTargets(ids: readonly string[], transaction: Transaction): Promise<Set<string>> {
  const shown = new Set<string>();
  for (let i = 0; i < ids.length; i += CHUNK) {
    const rows = await database().query<{ id: string }>(
      'SELECT DISTINCT target_id AS id FROM spectra WHERE target_id IN (:ids)',
      { replacements: { ids: ids.slice(i, i + CHUNK) }, type: QueryTypes.SELECT, transaction },
    );
    for (const { id } of rows) shown.add(id);
  }
  return shown;
}

/** Names of targets with spectra that stand on no list, in the order of names. */
export async function unlistedNames(programmeId: string, transaction: Transaction): Promise<string[]> {
  const rows = await database().query<{ name: string }>(
    `SELECT t.name FROM targets t WHERE t.programme_id = :programmeId AND NOT t.is_listed
        AND EXISTS (SELECT 1 FROM spectra s WHERE s.target_id = t.id) ORDER BY t.name`,
    { replacements: { programmeId }, type: QueryTypes.SELECT, transaction },
  );
  return rows.map(({ name }) => name);
}

export interface TargetListRow {
  id: string;
  name: string;
  rows: number;
  by: string;
  createdAt: Date;
  report: TargetListReport;
}

/** Lists of a programme, newest first. */
export async function targetListRows(programmeId: string): Promise<TargetListRow[]> {
  const rows = await database().query<Omit<TargetListRow, 'report'> & { notes: string | TargetListReport }>(
    `SELECT l.id, l.name, l.row_count AS \`rows\`, u.name AS \`by\`, l.created_at AS createdAt, l.notes
      FROM target_lists l JOIN users u ON u.id = l.created_by WHERE l.programme_id = :programmeId
      ORDER BY l.created_at DESC, l.id DESC LIMIT 100`,
    { replacements: { programmeId }, type: QueryTypes.SELECT },
  );
  return rows.map(({ notes, ...row }) => ({
    ...row,
    rows: Number(row.rows),
    report: typeof notes === 'string' ? (JSON.parse(notes) as TargetListReport) : notes,
  }));
}

import { QueryTypes, type Transaction } from 'sequelize';
import type { Instrument } from '$lib/domain/instrument';
import { database } from '../connection';
import { OBSERVED } from './observed';
import { NOT_PLANTED } from './planted';

const parsed = <T>(value: T | string): T => (typeof value === 'string' ? (JSON.parse(value) as T) : value);

/**
 * For use inside a query with spectra as `s`: it stands for its own photons alone, so that no two such spectra of a target
 * share any. A single exposure that is part of a stack is stood for by the stack.
 */
export const INDEPENDENT = `${OBSERVED} AND NOT EXISTS (SELECT 1 FROM spectrum_parts sp JOIN spectra whole
  ON whole.id = sp.whole_id WHERE sp.part_id = s.id AND whole.kind = 'stack' AND whole.superseded_by IS NULL)`;

export interface PartRow {
  id: string;
  sha256: string;
  originalName: string;
  extension: number;
  rowIndex: number;
  exposureSeconds: number | null;
  nightId: string;
  instrument: Instrument | null;
}

/** Spectra of a target that share no photons, in the order of their exposures; the night of each is its latest. */
export async function independentParts(targetId: string): Promise<PartRow[]> {
  const rows = await database().query<Omit<PartRow, 'instrument'> & { instrument: string | Instrument | null }>(
    `SELECT s.id, f.sha256, f.original_name AS originalName, s.extension, s.row_index AS rowIndex,
        s.exposure_seconds AS exposureSeconds, MAX(n.id) AS nightId, i.description AS instrument
      FROM spectra s JOIN files f ON f.id = s.file_id JOIN night_files nf ON nf.file_id = f.id
      JOIN nights n ON n.id = nf.night_id LEFT JOIN instruments i ON i.id = f.instrument_id
      WHERE s.target_id = :targetId AND s.state <> 'failed' AND ${INDEPENDENT} AND ${NOT_PLANTED}
      GROUP BY s.id ORDER BY MIN(n.civil_date), s.mid_exposure, s.id LIMIT 200`,
    { replacements: { targetId }, type: QueryTypes.SELECT },
  );
  return rows.map(({ instrument, ...row }) => ({
    ...row,
    instrument: instrument === null ? null : parsed<Instrument>(instrument),
  }));
}

/** Whether a programme has a combination of these parts. */
export async function hasCombination(programmeId: string, origin: string, transaction?: Transaction): Promise<boolean> {
  const rows = await database().query(
    'SELECT 1 FROM combinations WHERE programme_id = :programmeId AND origin = :origin FOR UPDATE',
    { replacements: { programmeId, origin }, type: QueryTypes.SELECT, transaction },
  );
  return rows.length > 0;
}

export interface NewCombination {
  fileId: string;
  programmeId: string;
  targetId: string;
  origin: string;
  parts: string[];
  notes: string[];
  createdBy: string;
}

export async function insertCombination(combination: NewCombination, transaction: Transaction): Promise<void> {
  const { parts, notes, ...rest } = combination;
  await database().query(
    `INSERT INTO combinations (file_id, programme_id, target_id, origin, parts, notes, created_by)
      VALUES (:fileId, :programmeId, :targetId, :origin, :parts, :notes, :createdBy)`,
    { replacements: { ...rest, parts: JSON.stringify(parts), notes: JSON.stringify(notes) }, transaction },
  );
}

/**
 * Marks the spectra of files that the installation combined: their kind, target and parts. A newer combination of a
 * target replaces the older ones. Run again, it changes nothing.
 */
export async function linkCombinations(fileIds: string[], transaction: Transaction): Promise<void> {
  if (fileIds.length === 0) return;
  const rows = await database().query<{ id: string; targetId: string; parts: string | string[] }>(
    `SELECT s.id, c.target_id AS targetId, c.parts FROM combinations c JOIN spectra s ON s.file_id = c.file_id
      WHERE c.file_id IN (:fileIds) ORDER BY s.id`,
    { replacements: { fileIds }, type: QueryTypes.SELECT, transaction },
  );
  for (const { id, targetId, parts } of rows) {
    const replacements = { id, targetId };
    await database().query(`UPDATE spectra SET kind = 'combination', target_id = :targetId WHERE id = :id`, {
      replacements,
      transaction,
    });
    await database().query('INSERT IGNORE INTO spectrum_parts (whole_id, part_id) VALUES :pairs', {
      replacements: { pairs: parsed<string[]>(parts).map((part) => [id, part]) },
      transaction,
    });
    await database().query(
      `UPDATE spectra SET superseded_by = :id
        WHERE target_id = :targetId AND kind = 'combination' AND id < :id AND superseded_by IS NULL`,
      { replacements, transaction },
    );
  }
}

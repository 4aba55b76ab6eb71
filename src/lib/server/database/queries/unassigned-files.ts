import { QueryTypes, type Transaction } from 'sequelize';
import type { Problem } from '$lib/domain/problem';
import { database } from '../connection';

const UUID = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i;
const select = { type: QueryTypes.SELECT } as const;

/** A stored file as its assignment page needs it. */
export interface UnassignedFile {
  id: string;
  programmeId: string;
  programmeName: string;
  sha256: string;
  sizeBytes: number;
  name: string;
  state: 'waiting' | 'read' | 'failed' | 'needs assignment';
  shape: string | null;
  problems: Problem[];
  instrumentId: string | null;
  nightId: string;
  civilDate: string;
}

export async function findUnassigned(fileId: string): Promise<UnassignedFile | null> {
  if (!UUID.test(fileId)) return null;
  const [row] = await database().query<UnassignedFile & { problems: string | Problem[] }>(
    `SELECT f.id, f.programme_id AS programmeId, p.name AS programmeName, f.sha256, f.size_bytes AS sizeBytes,
        f.original_name AS name, f.state, f.shape, f.problems, COALESCE(n.instrument_id, f.instrument_id) AS instrumentId,
        n.id AS nightId, n.civil_date AS civilDate
      FROM files f JOIN programmes p ON p.id = f.programme_id JOIN night_files nf ON nf.file_id = f.id
      JOIN nights n ON n.id = nf.night_id WHERE f.id = :fileId ORDER BY n.civil_date DESC LIMIT 1`,
    { replacements: { fileId }, ...select },
  );
  if (!row) return null;
  const problems = typeof row.problems === 'string' ? (JSON.parse(row.problems) as Problem[]) : row.problems;
  return { ...row, sizeBytes: Number(row.sizeBytes), problems };
}

/** For use inside a query with files as `f`: it waits for an assignment, is of the shape, and of the instrument or of none. */
const WAITS = `f.programme_id = :programmeId AND f.shape = :shape AND f.state = 'needs assignment'
  AND (f.instrument_id IS NULL OR f.instrument_id IN (
    SELECT v.id FROM instruments v WHERE v.programme_id = :programmeId AND v.name = :instrumentName))`;

/** Files of an instrument, or of none, that wait for an assignment and are of one shape, at most 1,000. */
export async function waitingOfShape(
  programmeId: string,
  shape: string,
  instrumentName: string,
): Promise<{ id: string; name: string }[]> {
  return database().query(`SELECT f.id, f.original_name AS name FROM files f WHERE ${WAITS} ORDER BY f.id LIMIT 1000`, {
    replacements: { programmeId, shape, instrumentName },
    ...select,
  });
}

/** Lets all waiting files of a shape be read again, by this version of the instrument; returns their ids. */
export async function readAgain(
  programmeId: string,
  shape: string,
  instrument: { id: string; name: string },
  transaction: Transaction,
): Promise<string[]> {
  const replacements = { programmeId, shape, instrumentId: instrument.id, instrumentName: instrument.name };
  const rows = await database().query<{ id: string }>(
    `SELECT f.id FROM files f WHERE ${WAITS} ORDER BY f.id FOR UPDATE`,
    { replacements, ...select, transaction },
  );
  const ids = rows.map(({ id }) => id);
  if (ids.length === 0) return ids;
  await database().query(
    `UPDATE files SET state = 'waiting', tries = 0, problems = '[]', shape = NULL, instrument_id = :instrumentId
      WHERE id IN (:ids)`,
    { replacements: { ...replacements, ids }, transaction },
  );
  return ids;
}

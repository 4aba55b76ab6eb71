import { QueryTypes, type Transaction } from 'sequelize';
import type { AcceptanceRow, ComparisonFilter } from '$lib/domain/comparison';
import { database } from '../connection';
import { newIdentifier } from '../identifier';

const UUID = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i;
const select = { type: QueryTypes.SELECT } as const;
/** Rows written by one statement. */
const AT_ONCE = 1_000;

/** Which measurement a spectrum had as its current one, and has from now on. */
export interface NewCurrent {
  spectrumId: string;
  fromId: string | null;
  toId: string | null;
}

/** Appends an acceptance and makes its measurements the current ones. */
export async function appendAcceptance(
  acceptance: { remeasureId: string; userId: string; filter: ComparisonFilter; undoes: string | null },
  changes: NewCurrent[],
  transaction: Transaction,
): Promise<string> {
  const id = newIdentifier();
  const { filter, ...rest } = acceptance;
  await database().query(
    `INSERT INTO acceptances (id, remeasure_id, user_id, filter, undoes)
      VALUES (:id, :remeasureId, :userId, :filter, :undoes)`,
    { replacements: { id, ...rest, filter: JSON.stringify(filter) }, transaction },
  );
  for (let i = 0; i < changes.length; i += AT_ONCE) {
    const some = changes.slice(i, i + AT_ONCE);
    await database().query(
      `INSERT INTO accepted_measurements (acceptance_id, spectrum_id, from_id, to_id)
        VALUES ${some.map(() => '(?, ?, ?, ?)').join(', ')}`,
      { replacements: some.flatMap(({ spectrumId, fromId, toId }) => [id, spectrumId, fromId, toId]), transaction },
    );
  }
  await database().query(
    `UPDATE spectra s JOIN accepted_measurements x ON x.spectrum_id = s.id AND x.acceptance_id = :id
      SET s.current_measurement_id = x.to_id`,
    { replacements: { id }, transaction },
  );
  return id;
}

export interface FoundAcceptance {
  id: string;
  remeasureId: string;
  programmeId: string;
  undoes: string | null;
}

export async function findAcceptance(id: string): Promise<FoundAcceptance | null> {
  if (!UUID.test(id)) return null;
  const [row] = await database().query<FoundAcceptance>(
    `SELECT a.id, a.remeasure_id AS remeasureId, r.programme_id AS programmeId, a.undoes
      FROM acceptances a JOIN remeasures r ON r.id = a.remeasure_id WHERE a.id = :id`,
    { replacements: { id }, ...select },
  );
  return row ?? null;
}

/** What an acceptance changed, with what is current now; the spectra are held until the transaction ends. */
export async function changesOf(
  acceptanceId: string,
  transaction: Transaction,
): Promise<(NewCurrent & { currentId: string | null; fileId: string })[]> {
  return database().query(
    `SELECT x.spectrum_id AS spectrumId, x.from_id AS fromId, x.to_id AS toId, s.current_measurement_id AS currentId,
        s.file_id AS fileId
      FROM accepted_measurements x JOIN spectra s ON s.id = x.spectrum_id WHERE x.acceptance_id = :acceptanceId
      ORDER BY s.id FOR UPDATE`,
    { replacements: { acceptanceId }, ...select, transaction },
  );
}

/** True where an acceptance was taken back. The acceptance is held, so that it is taken back once. */
export async function isUndone(acceptanceId: string, transaction: Transaction): Promise<boolean> {
  await database().query('SELECT id FROM acceptances WHERE id = :acceptanceId FOR UPDATE', {
    replacements: { acceptanceId },
    ...select,
    transaction,
  });
  const rows = await database().query('SELECT id FROM acceptances WHERE undoes = :acceptanceId', {
    replacements: { acceptanceId },
    ...select,
    transaction,
  });
  return rows.length > 0;
}

/** The acceptances of a re-measure, newest first, without those that take another back. */
export async function acceptancesOf(remeasureId: string): Promise<AcceptanceRow[]> {
  const rows = await database().query<Omit<AcceptanceRow, 'at'> & { at: Date | string }>(
    `SELECT a.id, u.name AS \`by\`, a.created_at AS at, (SELECT COUNT(*) FROM accepted_measurements x
        WHERE x.acceptance_id = a.id) AS spectra, w.name AS undoneBy
      FROM acceptances a JOIN users u ON u.id = a.user_id LEFT JOIN acceptances later ON later.undoes = a.id
      LEFT JOIN users w ON w.id = later.user_id
      WHERE a.remeasure_id = :remeasureId AND a.undoes IS NULL ORDER BY a.id DESC LIMIT 100`,
    { replacements: { remeasureId }, ...select },
  );
  return rows.map((row) => ({ ...row, at: new Date(row.at).toISOString(), spectra: Number(row.spectra) }));
}

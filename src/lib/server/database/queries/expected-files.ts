import { QueryTypes, type Transaction } from 'sequelize';
import type { NightSnapshot } from '$lib/domain/night';
import { database } from '../connection';

/** Paths named as examples of what is missing. */
const NAMED = 5;
/** Rows of one INSERT. */
const ROWS = 500;

export interface ExpectedFile {
  path: string;
  sizeBytes: number;
  sha256: string | null;
}

/** Writes down files that are about to come; one path of a night has one row, the latest word. */
export async function insertExpected(
  nightId: string,
  userId: string,
  files: readonly ExpectedFile[],
  transaction: Transaction,
): Promise<void> {
  for (let i = 0; i < files.length; i += ROWS) {
    const rows = files.slice(i, i + ROWS).map((file) => [nightId, file.path, file.sizeBytes, file.sha256, userId]);
    await database().query(
      `INSERT INTO expected_files (night_id, path, size_bytes, sha256, user_id) VALUES ${rows.map(() => '(?)').join(', ')}
        ON DUPLICATE KEY UPDATE size_bytes = VALUES(size_bytes), sha256 = VALUES(sha256), user_id = VALUES(user_id),
          announced_at = UTC_TIMESTAMP(6)`,
      { replacements: rows, transaction },
    );
  }
}

/** Takes rows away by digest (they came) or by path (they will not come); returns how many there were. */
export async function removeExpected(
  nightId: string,
  which: { sha256?: readonly string[]; paths?: readonly string[] },
  transaction: Transaction,
): Promise<number> {
  const { sha256, paths } = which;
  if (sha256?.length === 0 || paths?.length === 0) return 0;
  const condition = sha256 ? 'AND sha256 IN (:values)' : paths ? 'AND path IN (:values)' : '';
  const result = await database().query(`DELETE FROM expected_files WHERE night_id = :nightId ${condition}`, {
    replacements: { nightId, values: sha256 ?? paths ?? [] },
    type: QueryTypes.BULKDELETE,
    transaction,
  });
  return Number(result);
}

/** Forgets announcements older than this; returns how many. */
export async function removeStaleExpected(olderThanDays: number): Promise<number> {
  const result = await database().query(
    'DELETE FROM expected_files WHERE announced_at < UTC_TIMESTAMP(6) - INTERVAL :olderThanDays DAY LIMIT 10000',
    { replacements: { olderThanDays }, type: QueryTypes.BULKDELETE },
  );
  return Number(result);
}

/** What was announced for a night and has not come. */
export async function missingOfNight(nightId: string): Promise<NightSnapshot['missing']> {
  const replacements = { nightId };
  const [[sums], named] = await Promise.all([
    database().query<{ files: number | string; bytes: number | string | null; latest: Date | null }>(
      `SELECT COUNT(*) AS files, SUM(size_bytes) AS bytes, MAX(announced_at) AS latest
        FROM expected_files WHERE night_id = :nightId`,
      { replacements, type: QueryTypes.SELECT },
    ),
    database().query<{ path: string; by: string }>(
      `SELECT e.path, u.name AS \`by\` FROM expected_files e JOIN users u ON u.id = e.user_id
        WHERE e.night_id = :nightId ORDER BY e.path LIMIT ${NAMED}`,
      { replacements, type: QueryTypes.SELECT },
    ),
  ]);
  return {
    files: Number(sums.files),
    bytes: Number(sums.bytes ?? 0),
    latest: sums.latest ? new Date(sums.latest).toISOString() : null,
    by: named[0]?.by ?? null,
    first: named.map(({ path }) => path),
  };
}

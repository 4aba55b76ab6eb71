import { QueryTypes, type Transaction } from 'sequelize';
import type { NightSnapshot } from '$lib/domain/night';
import type { Problem } from '$lib/domain/problem';
import type { Unpacked, UploadState } from '$lib/domain/upload';
import { database } from '../connection';
import { newIdentifier } from '../identifier';

export type ArchiveKind = 'zip' | 'tar' | 'tar.gz';

export interface UploadRow {
  id: string;
  nightId: string;
  userId: string;
  name: string;
  sizeBytes: number;
  sha256: string | null;
  receivedBytes: number;
  state: UploadState['state'];
  archiveKind: ArchiveKind | null;
  fileId: string | null;
  already: boolean;
  unpacked: Unpacked | null;
  tries: number;
}

const COLUMNS = `id, night_id AS nightId, user_id AS userId, name, size_bytes AS sizeBytes, sha256,
  received_bytes AS receivedBytes, state, archive_kind AS archiveKind, file_id AS fileId, already, unpacked, tries`;
const select = { type: QueryTypes.SELECT } as const;
const UUID = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i;
/** A writer that says nothing for this long has gone; another may go on. */
const WRITER_SECONDS = 20;

const typed = (row: UploadRow): UploadRow => ({
  ...row,
  sizeBytes: Number(row.sizeBytes),
  receivedBytes: Number(row.receivedBytes),
  already: !!row.already,
  unpacked: typeof row.unpacked === 'string' ? (JSON.parse(row.unpacked) as Unpacked) : row.unpacked,
});

async function change(sql: string, replacements: Record<string, unknown>, transaction?: Transaction): Promise<boolean> {
  const changed = await database().query(sql, { replacements, type: QueryTypes.BULKUPDATE, transaction });
  return Number(changed) > 0;
}

export async function insertUpload(
  upload: Pick<UploadRow, 'nightId' | 'userId' | 'name' | 'sizeBytes' | 'sha256'>,
): Promise<UploadRow> {
  const id = newIdentifier();
  await database().query(
    `INSERT INTO uploads (id, night_id, user_id, name, size_bytes, sha256, problems)
      VALUES (:id, :nightId, :userId, :name, :sizeBytes, :sha256, '[]')`,
    { replacements: { id, ...upload } },
  );
  return (await findUpload(id))!;
}

export async function findUpload(id: string): Promise<UploadRow | null> {
  if (!UUID.test(id)) return null;
  const [row] = await database().query<UploadRow>(`SELECT ${COLUMNS} FROM uploads WHERE id = :id`, {
    replacements: { id },
    ...select,
  });
  return row ? typed(row) : null;
}

/** Uploads of a person to a night that wait for bytes, oldest first. */
export async function openUploadsOf(nightId: string, userId: string): Promise<UploadRow[]> {
  const rows = await database().query<UploadRow>(
    `SELECT ${COLUMNS} FROM uploads WHERE night_id = :nightId AND user_id = :userId AND state = 'open' ORDER BY id`,
    { replacements: { nightId, userId }, ...select },
  );
  return rows.map(typed);
}

/** Of these digests, those of archives that this night has unpacked, or is unpacking, whole. */
export async function archivesHere(nightId: string, sha256: readonly string[]): Promise<Set<string>> {
  if (sha256.length === 0) return new Set();
  const rows = await database().query<{ sha256: string }>(
    `SELECT DISTINCT sha256 FROM uploads WHERE night_id = :nightId AND sha256 IN (:sha256)
      AND archive_kind IS NOT NULL AND (state = 'unpacking' OR (state = 'done' AND JSON_LENGTH(problems) = 0))`,
    { replacements: { nightId, sha256 }, ...select },
  );
  return new Set(rows.map((row) => row.sha256));
}

/** Makes `writer` the one that writes at `offset`; false where another does, or the offset is another. */
export function takeWriting(id: string, writer: string, offset: number): Promise<boolean> {
  return change(
    `UPDATE uploads SET writer = :writer, writer_until = UTC_TIMESTAMP(6) + INTERVAL ${WRITER_SECONDS} SECOND
      WHERE id = :id AND state = 'open' AND received_bytes = :offset
        AND (writer IS NULL OR writer_until < UTC_TIMESTAMP(6))`,
    { id, writer, offset },
  );
}

/** Notes that all bytes up to `receivedBytes` are safe; false where the writer was taken for gone and replaced. */
export function noteReceived(id: string, writer: string, receivedBytes: number): Promise<boolean> {
  return change(
    `UPDATE uploads SET received_bytes = :receivedBytes, changed_at = UTC_TIMESTAMP(6),
        writer_until = UTC_TIMESTAMP(6) + INTERVAL ${WRITER_SECONDS} SECOND
      WHERE id = :id AND writer = :writer AND state = 'open'`,
    { id, writer, receivedBytes },
  );
}

export async function endWriting(id: string, writer: string): Promise<void> {
  await change('UPDATE uploads SET writer = NULL, writer_until = NULL WHERE id = :id AND writer = :writer', {
    id,
    writer,
  });
}

/** All bytes became a file of the night. */
export async function settleAsFile(id: string, file: { id: string; sha256: string; already: boolean }): Promise<void> {
  const { id: fileId, sha256, already } = file;
  await change(
    `UPDATE uploads SET state = 'done', file_id = :fileId, sha256 = :sha256, already = :already,
      changed_at = UTC_TIMESTAMP(6) WHERE id = :id`,
    { id, fileId, sha256, already },
  );
}

/** All bytes are here and are an archive's. */
export async function settleAsArchive(
  id: string,
  archive: { kind: ArchiveKind; sha256: string; sizeBytes: number },
  transaction: Transaction,
): Promise<void> {
  await change(
    `UPDATE uploads SET state = 'unpacking', archive_kind = :kind, sha256 = :sha256,
      size_bytes = :sizeBytes, received_bytes = :sizeBytes,
      changed_at = UTC_TIMESTAMP(6) WHERE id = :id`,
    { id, kind: archive.kind, sha256: archive.sha256, sizeBytes: archive.sizeBytes },
    transaction,
  );
}

/** Archives of a night, latest first. */
export async function archivesOfNight(nightId: string): Promise<NightSnapshot['archives']> {
  const rows = await database().query<UploadRow>(
    `SELECT ${COLUMNS} FROM uploads WHERE night_id = :nightId AND archive_kind IS NOT NULL
      ORDER BY state = 'unpacking' DESC, id DESC LIMIT 20`,
    { replacements: { nightId }, ...select },
  );
  return rows.map(typed).map(({ id, name, state, unpacked }) => ({
    id,
    name,
    state: state as NightSnapshot['archives'][number]['state'],
    unpacked,
  }));
}

/** Counts a try at unpacking before it is made; returns the upload as it stands then. */
export async function takeUnpacking(id: string): Promise<UploadRow | null> {
  await change(`UPDATE uploads SET tries = LEAST(tries + 1, 100) WHERE id = :id AND state = 'unpacking'`, { id });
  return findUpload(id);
}

export async function settleUnpacked(
  id: string,
  settled: { state: 'done' | 'failed'; unpacked: Unpacked; problems: Problem[] },
  transaction: Transaction,
): Promise<void> {
  const { state, unpacked, problems } = settled;
  await change(
    `UPDATE uploads SET state = :state, unpacked = :unpacked, problems = :problems, changed_at = UTC_TIMESTAMP(6)
      WHERE id = :id AND state = 'unpacking'`,
    { id, state, unpacked: JSON.stringify(unpacked), problems: JSON.stringify(problems) },
    transaction,
  );
}

export async function removeUpload(id: string): Promise<void> {
  await database().query('DELETE FROM uploads WHERE id = :id', { replacements: { id } });
}

/** Open uploads that nobody has gone on with for these days. */
export async function staleUploads(olderThanDays: number): Promise<string[]> {
  const rows = await database().query<{ id: string }>(
    `SELECT id FROM uploads WHERE state = 'open' AND changed_at < UTC_TIMESTAMP(6) - INTERVAL :olderThanDays DAY
      ORDER BY changed_at LIMIT 1000`,
    { replacements: { olderThanDays }, ...select },
  );
  return rows.map(({ id }) => id);
}

/** Of these ids, those of uploads whose staged bytes are still needed. */
export async function neededUploads(ids: readonly string[]): Promise<Set<string>> {
  if (ids.length === 0) return new Set();
  const rows = await database().query<{ id: string }>(
    `SELECT id FROM uploads WHERE id IN (:ids) AND state IN ('open', 'unpacking')`,
    { replacements: { ids }, ...select },
  );
  return new Set(rows.map(({ id }) => id));
}

import { QueryTypes, type Transaction } from 'sequelize';
import type { ReleaseSummary } from '$lib/domain/release-summary';
import { database } from '../connection';
import { newIdentifier } from '../identifier';
import { Release } from '../models/publishing';

export interface ReleaseRecord {
  id: string;
  number: number;
  draftedByName: string;
  frozenByName: string;
  notes: string;
  rowCount: number;
  contentSha256: string;
  engineVersion: string | null;
  summary: ReleaseSummary;
  frozenAt: Date;
}

type Row = Omit<ReleaseRecord, 'summary'> & { summary: string | ReleaseSummary };

const record = (row: Row): ReleaseRecord => ({
  ...row,
  summary: typeof row.summary === 'string' ? (JSON.parse(row.summary) as ReleaseSummary) : row.summary,
});

/** Releases of a catalogue, newest first. */
export async function listReleases(catalogueId: string): Promise<ReleaseRecord[]> {
  const rows = await database().query<Row>(
    `SELECT r.id, r.number, a.name AS draftedByName, b.name AS frozenByName, r.notes, r.row_count AS rowCount,
        r.content_sha256 AS contentSha256, r.engine_version AS engineVersion, r.summary, r.frozen_at AS frozenAt
      FROM releases r JOIN users a ON a.id = r.drafted_by JOIN users b ON b.id = r.frozen_by
      WHERE r.catalogue_id = :catalogueId ORDER BY r.number DESC`,
    { replacements: { catalogueId }, type: QueryTypes.SELECT },
  );
  return rows.map(record);
}

/** The number the next release gets. Asked while the catalogue is locked. */
export async function nextReleaseNumber(catalogueId: string, transaction: Transaction): Promise<number> {
  const highest = await Release.max<number | null, Release>('number', { where: { catalogueId }, transaction });
  return (highest ?? 0) + 1;
}

export async function insertRelease(
  release: {
    catalogueId: string;
    number: number;
    draftId: string;
    draftedBy: string;
    frozenBy: string;
    notes: string;
    rowCount: number;
    contentSha256: string;
    engineVersion: string | null;
    summary: ReleaseSummary;
  },
  transaction: Transaction,
): Promise<string> {
  const id = newIdentifier();
  await Release.create({ id, ...release, frozenAt: new Date() }, { transaction });
  return id;
}

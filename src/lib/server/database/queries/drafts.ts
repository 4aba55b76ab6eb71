import { QueryTypes, type Transaction } from 'sequelize';
import type { DraftSelection } from '$lib/domain/release';
import { database } from '../connection';
import { newIdentifier } from '../identifier';
import { Draft } from '../models/publishing';

const UUID = /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i;

export interface DraftRecord {
  id: string;
  catalogueId: string;
  selection: DraftSelection;
  notes: string;
  state: 'open' | 'frozen' | 'dropped';
  createdBy: string;
  createdByName: string;
  createdAt: Date;
}

type Row = Omit<DraftRecord, 'selection'> & { selection: string | DraftSelection };

const COLUMNS = `d.id, d.catalogue_id AS catalogueId, d.selection, d.notes, d.state, d.created_by AS createdBy,
  u.name AS createdByName, d.created_at AS createdAt`;

const record = (row: Row): DraftRecord => ({
  ...row,
  selection: typeof row.selection === 'string' ? (JSON.parse(row.selection) as DraftSelection) : row.selection,
});

/** A draft by its id; `lock` holds its row until the transaction ends. */
export async function findDraft(id: string, transaction?: Transaction): Promise<DraftRecord | null> {
  if (!UUID.test(id)) return null;
  const rows = await database().query<Row>(
    `SELECT ${COLUMNS} FROM drafts d JOIN users u ON u.id = d.created_by WHERE d.id = :id
      ${transaction ? 'FOR UPDATE' : ''}`,
    { replacements: { id }, type: QueryTypes.SELECT, transaction },
  );
  return rows[0] ? record(rows[0]) : null;
}

/** The open drafts of these catalogues: at most one each. */
export async function findOpenDrafts(catalogueIds: string[], transaction?: Transaction): Promise<DraftRecord[]> {
  if (catalogueIds.length === 0) return [];
  const rows = await database().query<Row>(
    `SELECT ${COLUMNS} FROM drafts d JOIN users u ON u.id = d.created_by
      WHERE d.catalogue_id IN (:catalogueIds) AND d.state = 'open'`,
    { replacements: { catalogueIds }, type: QueryTypes.SELECT, transaction },
  );
  return rows.map(record);
}

export async function insertDraft(
  draft: { catalogueId: string; selection: DraftSelection; notes: string; createdBy: string },
  transaction: Transaction,
): Promise<string> {
  const id = newIdentifier();
  await Draft.create({ id, ...draft }, { transaction });
  return id;
}

export async function setDraftState(id: string, state: 'frozen' | 'dropped', transaction: Transaction): Promise<void> {
  await Draft.update({ state }, { where: { id }, transaction });
}

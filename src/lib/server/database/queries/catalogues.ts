import { QueryTypes, type Transaction } from 'sequelize';
import { database } from '../connection';
import { Catalogue } from '../models/publishing';

const select = { type: QueryTypes.SELECT } as const;

export interface CatalogueRecord {
  id: string;
  programmeId: string;
  programmeName: string;
  isDemo: boolean;
  /** Verdicts the programme asks for on a spectrum. */
  looks: number;
  slug: string;
  title: string;
  abstract: string;
}

const COLUMNS = `c.id, c.programme_id AS programmeId, p.name AS programmeName, p.is_demo AS isDemo, p.looks, c.slug, c.title,
  c.abstract`;

export async function findCatalogue(slug: string): Promise<CatalogueRecord | null> {
  const [row] = await database().query<CatalogueRecord>(
    `SELECT ${COLUMNS} FROM catalogues c JOIN programmes p ON p.id = c.programme_id WHERE c.slug = :slug`,
    { replacements: { slug }, ...select },
  );
  return row ? { ...row, isDemo: !!row.isDemo } : null;
}

/** Writes a catalogue and returns its id; null where the slug is taken. */
export async function insertCatalogue(
  catalogue: { programmeId: string; slug: string; title: string; abstract: string; createdBy: string },
  transaction: Transaction,
): Promise<string | null> {
  const [made, isNew] = await Catalogue.findOrCreate({
    where: { slug: catalogue.slug },
    defaults: catalogue as never,
    transaction,
  });
  return isNew ? made.id : null;
}

/** Holds the catalogue's row until the transaction ends, so that drafts and release numbers are made one at a time. */
export async function lockCatalogue(id: string, transaction: Transaction): Promise<void> {
  await Catalogue.findByPk(id, { attributes: ['id'], lock: transaction.LOCK.UPDATE, transaction });
}

export interface CatalogueListRow extends CatalogueRecord {
  latestRelease: number | null;
  rowCount: number | null;
  frozenAt: Date | null;
  releases: number;
}

/** Catalogues with a release, and those of these programmes without; newest release first, then the unreleased. */
export async function listCatalogueRows(programmeIds: string[]): Promise<CatalogueListRow[]> {
  const rows = await database().query<CatalogueListRow>(
    `SELECT ${COLUMNS}, r.number AS latestRelease, r.row_count AS rowCount, r.frozen_at AS frozenAt,
        (SELECT COUNT(*) FROM releases x WHERE x.catalogue_id = c.id) AS releases
      FROM catalogues c JOIN programmes p ON p.id = c.programme_id
      LEFT JOIN releases r ON r.catalogue_id = c.id
        AND r.number = (SELECT MAX(y.number) FROM releases y WHERE y.catalogue_id = c.id)
      WHERE r.id IS NOT NULL OR c.programme_id IN (:programmeIds)
      ORDER BY r.frozen_at IS NULL, r.frozen_at DESC, c.title`,
    { replacements: { programmeIds: programmeIds.length ? programmeIds : [null] }, ...select },
  );
  return rows.map((row) => ({ ...row, isDemo: !!row.isDemo, releases: Number(row.releases) }));
}

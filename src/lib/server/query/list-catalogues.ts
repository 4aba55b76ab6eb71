import type { CatalogueInList } from '$lib/domain/release-view';
import { programmesWhere, type Actor } from '../auth/permissions';
import { listCatalogueRows } from '../database/queries/catalogues';

/** Public use-case: catalogues with a release, and for members those of their programmes that have none yet. */
export async function listCatalogues(actor: Actor | null): Promise<CatalogueInList[]> {
  const rows = await listCatalogueRows(actor ? programmesWhere(actor, 'programme.read') : []);
  return rows.map(({ slug, title, abstract, programmeName, isDemo, latestRelease, rowCount, frozenAt, releases }) => ({
    slug,
    title,
    abstract,
    programme: { name: programmeName, isDemo },
    latest:
      latestRelease !== null && rowCount !== null && frozenAt
        ? { release: latestRelease, rowCount, frozenAt: new Date(frozenAt).toISOString() }
        : null,
    releases,
  }));
}

import { programmesWhere, type Actor } from '../auth/permissions';
import { listCatalogueRows } from '../database/queries/catalogues';

export interface CatalogueInList {
  slug: string;
  title: string;
  abstract: string;
  programme: { name: string; isDemo: boolean };
  /** The newest release; null where there is none yet, which only members of the programme see. */
  latest: { release: number; rowCount: number; frozenAt: string } | null;
  releases: number;
}

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

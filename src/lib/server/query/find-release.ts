import { Refusal } from '$lib/domain/refusal';
import { findCatalogue, type CatalogueRecord } from '../database/queries/catalogues';
import { listReleases, type ReleaseRecord } from '../database/queries/releases';

export interface FoundRelease {
  catalogue: CatalogueRecord;
  release: ReleaseRecord;
  /** All of the catalogue's, newest first. */
  releases: ReleaseRecord[];
}

const NUMBER = /^[1-9]\d{0,8}$/;

/** A release by its catalogue's slug and its number, or the latest. Releases are public, so nobody is asked who they are. */
export async function findRelease(slug: string, which: string): Promise<FoundRelease> {
  const catalogue = await findCatalogue(slug);
  const releases = catalogue ? await listReleases(catalogue.id) : [];
  // A catalogue without a release is not told apart from one that isn't there: it is its programme's own business.
  if (!catalogue || releases.length === 0) {
    throw new Refusal('not-found', `There is no released catalogue "${slug}".`, 'See /api/v1/catalogues for those.');
  }
  const release =
    which === 'latest'
      ? releases[0]
      : NUMBER.test(which)
        ? releases.find(({ number }) => number === Number(which))
        : undefined;
  if (!release) {
    const mend = `Its releases are ${releases.map(({ number }) => number).join(', ')}.`;
    throw new Refusal('not-found', `"${slug}" has no release "${which}".`, mend);
  }
  return { catalogue, release, releases };
}

/** A release in a line, for the head of its tables; invented data say so wherever they go. */
export function describeRelease({ catalogue, release }: FoundRelease): string {
  const name = `${catalogue.title}, release ${release.number}`;
  return catalogue.isDemo ? `${name}. Invented data, not observations.` : name;
}

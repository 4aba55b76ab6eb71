import { countReleaseRows, type RowFilter } from '../database/queries/release-rows-read';
import { findRelease } from './find-release';

/** Public use-case: how many rows of a release match a filter. */
export async function countRows(slug: string, which: string, filter: RowFilter): Promise<number> {
  const { release } = await findRelease(slug, which);
  return countReleaseRows(release.id, filter);
}

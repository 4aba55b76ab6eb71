import type { PlottedRow } from '$lib/domain/release-view';
import { everyNthRow } from '../database/queries/release-rows-read';
import { findRelease } from './find-release';

/** Rows in the plots of a release; of more rows an even sample is shown. */
const MOST_PLOTTED = 3_000;

/** Public use-case: rows for the plots of a release. `step` is above 1 where only every so many are shown. */
export async function readPlottedRows(slug: string, which: string): Promise<{ step: number; rows: PlottedRow[] }> {
  const { release } = await findRelease(slug, which);
  const step = Math.max(1, Math.ceil(release.rowCount / MOST_PLOTTED));
  return { step, rows: await everyNthRow(release.id, step) };
}

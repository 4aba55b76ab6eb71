import type { ReleaseRow } from '$lib/domain/release';
import { releaseRowBatches } from '../database/queries/release-rows-read';
import type { RowQuery } from './parse-row-query';

/** Matching rows of a release batch by batch, up to the query's limit where it names one. */
export async function* matchingRows(releaseId: string, query: RowQuery): AsyncGenerator<ReleaseRow[]> {
  let left = query.limit ?? Infinity;
  for await (const batch of releaseRowBatches(releaseId, query.filter, query.after)) {
    yield batch.slice(0, left);
    left -= batch.length;
    if (left <= 0) return;
  }
}

import { Refusal } from '$lib/domain/refusal';
import type { QueriedRows, ReleasePageData } from './release-page-data';
import { config } from '$lib/server/config/config';
import { countRows } from '$lib/server/query/count-rows';
import { parseRowQuery } from '$lib/server/query/parse-row-query';
import { queryRows } from '$lib/server/query/query-rows';
import { readPlottedRows } from '$lib/server/query/read-plotted-rows';
import { readRelease } from '$lib/server/query/read-release';

const ROWS_A_PAGE = 100;
/** Parameters of the address that are the page's own, not the query's. */
const OF_THE_PAGE = ['before', 'format', 'limit'];

/** The rows that the address asks for; a query that is not valid is told beside its form, and no rows are shown. */
async function queried(slug: string, which: string, url: URL): Promise<QueriedRows> {
  const params = new URLSearchParams(url.searchParams);
  for (const name of OF_THE_PAGE) params.delete(name);
  const before = Number(url.searchParams.get('before')) || 0;
  try {
    const query = { ...parseRowQuery(params), limit: ROWS_A_PAGE };
    const [{ rows, next }, count] = await Promise.all([
      queryRows(slug, which, query),
      countRows(slug, which, query.filter),
    ]);
    return { rows, next, count, before: query.after > 0 ? before : 0, problem: null };
  } catch (error) {
    if (!(error instanceof Refusal) || error.code !== 'invalid') throw error;
    const { what, mend, where } = error;
    return { rows: [], next: null, count: 0, before: 0, problem: { what, mend, where } };
  }
}

/** Everything the page of a release shows. */
export async function loadRelease(slug: string, which: string, url: URL): Promise<ReleasePageData> {
  const release = await readRelease(slug, which);
  const [result, plotted] = await Promise.all([
    queried(slug, which, url),
    readPlottedRows(slug, String(release.release)),
  ]);
  return { release, result, plotted, origin: new URL(config().ORIGIN).origin };
}

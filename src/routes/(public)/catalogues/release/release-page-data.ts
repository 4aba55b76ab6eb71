import type { ReleaseRow } from '$lib/domain/release';
import type { PlottedRow, ReleaseView } from '$lib/domain/release-view';

/** The rows a page shows, and where they stand among all that match. */
export interface QueriedRows {
  rows: ReleaseRow[];
  /** Cursor of the rows after these; null where there are none. */
  next: string | null;
  /** How many rows match in all. */
  count: number;
  /** How many matching rows come before these. */
  before: number;
  /** What is wrong with the query; then no rows are shown. */
  problem: { what: string; mend: string; where: string } | null;
}

export interface ReleasePageData {
  release: ReleaseView;
  result: QueriedRows;
  /** Rows of the plots: all, or every `step`-th. */
  plotted: { step: number; rows: PlottedRow[] };
  /** Public address of this installation, for the examples. */
  origin: string;
}

/** A target list as a table of text, before anything is read into it. */
export interface ListTable {
  columns: ListColumn[];
  rows: string[][];
  /** Where each row stands, in words: `line 12` or `row 3`. */
  places: string[];
  /** Celestial system that the file names, e.g. ICRS or FK5; null where it is silent. */
  system: string | null;
}

export interface ListColumn {
  name: string;
  unit: string | null;
  ucd: string | null;
}

/** Characters of a heading that are looked at: a longer one is a slip of quotes, and patterns take their time over it. */
export const MAX_HEADING_CHARACTERS = 200;

/** Rows that a list may have. */
export const MAX_TARGETS = 100_000;

import type { TableColumn } from './release-columns';
import type { ReleaseSummary } from './release-summary';

/** How to cite a release: a line of text, and an entry for BibTeX. */
export interface Citation {
  text: string;
  bibtex: string;
}

/** Everything about a release but its rows. */
export interface ReleaseView {
  catalogue: { slug: string; title: string; abstract: string; programme: { name: string; isDemo: boolean } };
  release: number;
  frozenAt: string;
  draftedBy: string;
  signedBy: string;
  notes: string;
  rowCount: number;
  /** SHA-256 of the whole release as CSV, as `rows?format=csv` gives it. */
  contentSha256: string;
  engineVersion: string | null;
  summary: ReleaseSummary;
  citation: Citation;
  columns: TableColumn[];
  /** Every release of the catalogue, newest first. */
  releases: { release: number; rowCount: number; frozenAt: string }[];
}

/** A row of a release as its plots need it: ICRS degrees. */
export interface PlottedRow {
  ra: number;
  dec: number;
  redshift: number;
  confidence: 'secure' | 'probable' | 'ambiguous';
}

/** A catalogue and its releases. */
export interface CatalogueView {
  slug: string;
  title: string;
  abstract: string;
  programme: { name: string; isDemo: boolean };
  /** Newest first; empty only for members of the programme. */
  releases: { release: number; rowCount: number; frozenAt: string; contentSha256: string; url: string }[];
}

/** A catalogue as the list of all shows it. */
export interface CatalogueInList {
  slug: string;
  title: string;
  abstract: string;
  programme: { name: string; isDemo: boolean };
  /** The newest release; null where there is none yet, which only members of the programme see. */
  latest: { release: number; rowCount: number; frozenAt: string } | null;
  releases: number;
}

import type { DraftSelection, ReleaseRow } from './release';
import type { ReleaseSummary } from './release-summary';

/** Why a spectrum brings no row. */
export type KeptOut =
  'left out' | 'open question' | 'no redshift' | 'not judged' | 'other confidence' | 'nothing measured';

/** Something about a draft that a curator must know before signing. */
export interface DraftCheck {
  code: 'no-rows' | 'open-questions' | 'missing-positions' | 'duplicates' | 'fewer-looks';
  /** True where the draft can't be frozen as long as this stands. */
  blocks: boolean;
  count: number;
  what: string;
  mend: string;
  /** The first of them in words, each with the names of the targets, and the spectrum, it is about. */
  examples: { text: string; names: string[]; spectrum?: string }[];
}

/** A draft, what it would publish now, and what stands against it. */
export interface DraftPreview {
  id: string;
  state: 'open' | 'frozen' | 'dropped';
  catalogue: { slug: string; title: string; programme: { name: string; isDemo: boolean } };
  selection: DraftSelection;
  notes: string;
  createdBy: string;
  createdAt: string;
  rowCount: number;
  spectra: number;
  targetsWithChoice: number;
  keptOut: Record<KeptOut, number>;
  summary: ReleaseSummary;
  checks: DraftCheck[];
  /** Sentences that will go with the release besides `notes`. */
  notesOnRows: string[];
  rows: ReleaseRow[];
  /** Of the rows as they are now; whoever signs hands it back, so that they sign what they saw. */
  contentSha256: string;
  /** Why this person can't sign, whatever the checks say; null where they can. */
  signing: string | null;
}

/** A catalogue as its curators see it. */
export interface CuratedCatalogue {
  slug: string;
  title: string;
  programme: { name: string; isDemo: boolean };
  latestRelease: number | null;
  draft: { id: string; createdBy: string; createdAt: string; isOwn: boolean } | null;
}

export interface CuratedProgramme {
  slug: string;
  name: string;
  /** Names of its curators: one drafts, another signs. */
  curators: string[];
}

import { z } from 'zod';
import { CONFIDENCE_WORDS, type Confidence } from './confidence';

/**
 * What became of an answer, the gravest first: another redshift, none where there was one, one where there was none,
 * another word for the same, or nothing of note.
 */
export const CHANGES = ['moved', 'lost', 'found', 'confidence', 'alike'] as const;
export type Change = (typeof CHANGES)[number];

/** Whether the new measurement is the current one yet. */
export const ACCEPTED = ['open', 'accepted'] as const;
export type Accepted = (typeof ACCEPTED)[number];

/** Which spectra of a comparison are meant; lives in the address. */
export const comparisonFilterSchema = z.object({
  change: z.enum(CHANGES).optional(),
  /** Confidence before and after. */
  from: z.enum(CONFIDENCE_WORDS).optional(),
  to: z.enum(CONFIDENCE_WORDS).optional(),
  /** Least and largest |dz| / (1 + z), km/s. */
  leastKms: z.coerce.number().min(0).max(300_000).optional(),
  mostKms: z.coerce.number().min(0).max(300_000).optional(),
  accepted: z.enum(ACCEPTED).optional(),
});
export type ComparisonFilter = z.output<typeof comparisonFilterSchema>;

export const comparisonPageSchema = comparisonFilterSchema.extend({
  limit: z.coerce.number().int().min(1).max(1000).default(200),
  cursor: z.string().max(200).optional(),
});

/** What one measurement answered. */
export interface ComparedAnswer {
  measurement: string;
  redshift: number | null;
  redshiftError: number | null;
  confidence: Confidence;
  probability: number;
  objectClass: string | null;
  engineVersion: string;
  /** Version of the instrument it was read by; null where there is none. */
  instrumentVersion: number | null;
}

/** One spectrum before and after. */
export interface ComparedSpectrum {
  spectrum: string;
  name: string;
  change: Change;
  /** c |dz| / (1 + mean z), km/s; null where one of them has no redshift. */
  velocityKms: number | null;
  before: ComparedAnswer;
  after: ComparedAnswer;
  accepted: boolean;
}

/** How many spectra went from one word to another, by what became of the answer and whether it is accepted. */
export interface ComparisonCount {
  from: Confidence;
  to: Confidence;
  change: Change;
  accepted: boolean;
  count: number;
}

/** What accepting the new measurements of a filter would do, in numbers. */
export interface AcceptancePreview {
  /** Spectra whose new measurement would become the current one. */
  accept: number;
  /** Spectra left alone, and why. */
  leave: { current: number; open: number; otherwise: number; unseen: number };
}

export const acceptSchema = z
  .object({
    filter: comparisonFilterSchema.strict().default({}),
    /** How many the person was told would be accepted: where it is another number by now, nothing is done. */
    expected: z.number().int().min(0),
  })
  .strict();

/** An acceptance that can be taken back, newest first. Times ISO 8601 UTC. */
export interface AcceptanceRow {
  id: string;
  by: string;
  at: string;
  spectra: number;
  /** Taken back since, by whom. */
  undoneBy: string | null;
}

import { z } from 'zod';
import { confidenceSchema, type Confidence } from './confidence';
import type { Flag } from './flag';
import type { VerdictDetails } from './verdict';

const reason = z.string().trim().min(1, 'Say in words why.').max(4000);
/** Ids of the verdicts, and of the ruling, that the person had before them: what changed meanwhile is said, not overruled. */
const seen = z.array(z.uuid()).max(40).default([]);

/** What a third person rules where verdicts differ. */
export const rulingInputSchema = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('verdict'), verdict: z.uuid(), reason, seen }),
  z.object({
    kind: z.literal('by hand'),
    redshift: z.coerce.number().min(-0.01).max(20),
    confidence: confidenceSchema.exclude(['none']),
    reason,
    seen,
  }),
  z.object({ kind: z.literal('no redshift'), reason, seen }),
]);
export type RulingInput = z.infer<typeof rulingInputSchema>;

/** One side of a question. */
export interface QuestionVerdict {
  id: string;
  by: string;
  redshift: number | null;
  redshiftError: number | null;
  confidence: Confidence | null;
  /** Where the redshift comes from, in words. */
  origin: string;
  flags: Flag[];
  comment: string;
  /** ISO 8601. */
  at: string;
}

/** A ruling as it is shown. */
export interface QuestionRuling {
  id: string;
  by: string;
  redshift: number | null;
  redshiftError: number | null;
  confidence: Confidence | null;
  /** Whose verdict it takes; null where it says something else. */
  takes: string | null;
  reason: string;
  at: string;
  /** The reader gave it, and may take it back. */
  isOwn: boolean;
}

/** A spectrum on which verdicts differ, or did before a ruling. */
export interface Question {
  standing: 'agreed' | 'open' | 'ruled';
  verdicts: QuestionVerdict[];
  /** Masks and second redshifts by verdict, where there are any. */
  details: Record<string, VerdictDetails>;
  /** Largest velocity between two of them, km/s. */
  apartKms: number | null;
  ruling: QuestionRuling | null;
  /** Why the reader can't rule; null where they can. */
  whyNot: string | null;
}

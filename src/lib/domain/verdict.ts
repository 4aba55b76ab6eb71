import { z } from 'zod';
import { confidenceSchema } from './confidence';
import { flagSchema } from './flag';
import { masksSchema, masksTextSchema, type Mask } from './mask';

export const VERDICT_KINDS = ['candidate', 'by hand', 'no redshift'] as const;
export const verdictKindSchema = z.enum(VERDICT_KINDS);
export type VerdictKind = z.infer<typeof verdictKindSchema>;

const comment = z.string().trim().max(4000).default('');
const flags = z.array(flagSchema).max(12).default([]);
/** Time of the look while the page was in sight and in use, seconds. Whatever a page counts, a look has 15 minutes at most. */
const lookSeconds = z.coerce
  .number()
  .min(0)
  .transform((seconds) => Math.min(seconds, 900))
  .optional();
const redshift = z.coerce.number().min(-0.01).max(20);
/** Stretches left out of the fit that the verdict rests on. */
const masks = z.union([masksTextSchema, masksSchema]).optional();
/** A second object in the same light: its redshift, and 1 sigma where it is known. */
const second = {
  secondRedshift: redshift.nullable().optional(),
  secondRedshiftError: z.coerce.number().positive().max(1).nullable().optional(),
};

/** What a scientist decides on a spectrum. `candidate` is the place in the measurement's list, from 0. */
export const verdictInputSchema = z.discriminatedUnion('kind', [
  z.object({
    kind: z.literal('candidate'),
    candidate: z.coerce.number().int().min(0).max(31),
    /** The redshift that the person saw at that place: where another measurement is current by now, it is refused. */
    redshift: redshift.optional(),
    confidence: confidenceSchema.exclude(['none']),
    ...second,
    masks,
    flags,
    comment,
    lookSeconds,
  }),
  z.object({
    kind: z.literal('by hand'),
    redshift,
    /** Known once the redshift was snapped to a fit. */
    redshiftError: z.coerce.number().positive().max(1).nullable().default(null),
    confidence: confidenceSchema.exclude(['none']),
    ...second,
    masks,
    flags,
    comment,
    lookSeconds,
  }),
  z.object({ kind: z.literal('no redshift'), masks, flags, comment, lookSeconds }),
]);
export type VerdictInput = z.infer<typeof verdictInputSchema>;

/** What a verdict rests on besides its redshift. */
export interface VerdictDetails {
  masks: Mask[];
  secondRedshift: number | null;
  secondRedshiftError: number | null;
}

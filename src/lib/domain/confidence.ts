import { z } from 'zod';

/** The four words for how far a redshift may be trusted, best first. Defined by calibrated probability and evidence. */
export const CONFIDENCE_WORDS = ['secure', 'probable', 'ambiguous', 'none'] as const;
export const confidenceSchema = z.enum(CONFIDENCE_WORDS);
export type Confidence = z.infer<typeof confidenceSchema>;

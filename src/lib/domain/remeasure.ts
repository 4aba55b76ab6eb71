import { z } from 'zod';

/** How the spectra of a re-measure stand; `skipped` ones have the very measurement that it would make. */
export const REMEASURE_STATES = ['waiting', 'measured', 'skipped', 'failed', 'cancelled'] as const;
export type RemeasuredState = (typeof REMEASURE_STATES)[number];

/** What is to be measured again: exactly one of a night and a programme, by id or slug. */
export const remeasureRequestSchema = z
  .object({
    night: z.uuid().optional(),
    programme: z.string().min(1).max(60).optional(),
    /** Why, in a sentence for those who read the comparison. */
    reason: z.string().trim().max(500).default(''),
  })
  .strict()
  .refine(({ night, programme }) => (night === undefined) !== (programme === undefined), {
    message: 'name a night or a programme, one of the two',
    path: ['night'],
  });
export type RemeasureRequest = z.output<typeof remeasureRequestSchema>;

/** A re-measure and how far it is. Times ISO 8601 UTC. */
export interface RemeasureSummary {
  id: string;
  programme: { id: string; slug: string; name: string };
  night: { id: string; civilDate: string } | null;
  reason: string;
  engineVersion: string;
  state: 'running' | 'done' | 'cancelled';
  by: string;
  createdAt: string;
  finishedAt: string | null;
  counts: Record<RemeasuredState, number> & { total: number };
}

import { z } from 'zod';

export const commentInputSchema = z.object({ text: z.string().trim().min(1, 'Write something.').max(4000) });

/** A comment on a spectrum as it is shown. */
export interface ShownComment {
  id: string;
  by: string;
  text: string;
  /** ISO 8601. */
  at: string;
}

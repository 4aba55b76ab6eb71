import { z } from 'zod';
import type { Problem } from './input-problem';

// The class stands apart, so that readers and measuring threads start without the schema package.
export { InputProblem, type Problem } from './input-problem';

/** The schema of a problem, as jobs store it and the API answers with it. */
export const problemSchema = z.object({
  code: z.string().regex(/^[a-z0-9-]+$/),
  what: z.string(),
  where: z.string(),
  mend: z.string(),
  extension: z.number().int().min(0).optional(),
  row: z.number().int().min(1).optional(),
}) satisfies z.ZodType<Problem>;

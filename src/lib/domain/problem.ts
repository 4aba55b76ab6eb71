import { z } from 'zod';

/**
 * What is wrong with an input, said so that its owner can mend it.
 * `what` names the fault, `where` the place (file, HDU, row, line, column), `mend` the way out.
 */
export const problemSchema = z.object({
  code: z.string().regex(/^[a-z0-9-]+$/),
  what: z.string(),
  where: z.string(),
  mend: z.string(),
  /** HDU counted from 0, where the fault lies in one. */
  extension: z.number().int().min(0).optional(),
  /** Row counted from 1, where the fault lies in one. */
  row: z.number().int().min(1).optional(),
});
export type Problem = z.infer<typeof problemSchema>;

/** An expected failure of reading an input; carries the problem that is shown to the person. */
export class InputProblem extends Error {
  readonly problem: Problem;

  constructor(problem: Problem) {
    super(`${problem.where}: ${problem.what} ${problem.mend}`.trim());
    this.name = 'InputProblem';
    this.problem = problem;
  }
}

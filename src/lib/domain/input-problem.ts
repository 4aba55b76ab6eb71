/**
 * What is wrong with an input, said so that its owner can mend it.
 * `what` names the fault, `where` the place (file, HDU, row, line, column), `mend` the way out.
 */
export interface Problem {
  code: string;
  what: string;
  where: string;
  mend: string;
  /** HDU counted from 0, where the fault lies in one. */
  extension?: number | undefined;
  /** Row counted from 1, where the fault lies in one. */
  row?: number | undefined;
}

/** An expected failure of reading an input; carries the problem that is shown to the person. */
export class InputProblem extends Error {
  readonly problem: Problem;

  constructor(problem: Problem) {
    super(`${problem.where}: ${problem.what} ${problem.mend}`.trim());
    this.name = 'InputProblem';
    this.problem = problem;
  }
}

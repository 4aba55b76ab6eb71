import type { Problem } from '$lib/domain/input-problem';
import type { MeasureOutput } from '$lib/domain/measurement';

/** One line of output and what goes to standard error with it. */
export interface MeasuredLine {
  /** Place among the file's lines. */
  order: number;
  json: string;
  notes: string[];
  failed: boolean;
}

/** The output object of a problem. */
export function problemLine(source: string, problem: Problem, name: string | null = null): Omit<MeasuredLine, 'order'> {
  const error = `${problem.what} ${problem.mend}`.trim();
  const output: MeasureOutput = { source, extension: problem.extension ?? 0, row: problem.row ?? 1, name, error };
  return { json: JSON.stringify(output), notes: [`${problem.where}: ${error}`], failed: true };
}

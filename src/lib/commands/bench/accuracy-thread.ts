import { runTask, type FlavourOffset } from './run-task';
import type { Outcome } from './outcome';
import type { BenchTask } from './plan-spectra';

/** Called by the pool in a thread of its own. */
export function scoreTask(task: BenchTask): (Outcome | FlavourOffset)[] {
  return runTask(task);
}

import { InputProblem } from '$lib/domain/input-problem';
import type { Problem } from '$lib/domain/input-problem';

/** Where in an input something stands; `extension` counts HDUs from 0, `row` from 1. */
export interface Place {
  file: string;
  extension?: number;
  row?: number;
  /** A finer place in words: `column 3`, `line 12`, `card CDELT1`. */
  detail?: string;
}

/** The place as a person reads it: `night.fits, HDU 1, row 3, column FLUX`. */
export function describePlace(place: Place): string {
  const parts = [place.file];
  if (place.extension !== undefined) parts.push(`HDU ${place.extension}`);
  if (place.row !== undefined) parts.push(`row ${place.row}`);
  if (place.detail !== undefined) parts.push(place.detail);
  return parts.join(', ');
}

/** An expected failure at a place: what is wrong, and how to mend it. */
export function problemAt(place: Place, code: string, what: string, mend: string): InputProblem {
  const problem: Problem = { code, what, where: describePlace(place), mend };
  if (place.extension !== undefined) problem.extension = place.extension;
  if (place.row !== undefined) problem.row = place.row;
  return new InputProblem(problem);
}

/** Runs `read`; an expected failure is added to `problems` and gives null, anything else is thrown on. */
export function collectProblem<T>(problems: Problem[], read: () => T): T | null {
  try {
    return read();
  } catch (error) {
    if (!(error instanceof InputProblem)) throw error;
    problems.push(error.problem);
    return null;
  }
}

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

/** Faulty rows of one HDU that are told one by one; beyond them the HDU itself is at fault. */
const MAX_FAULTY_ROWS = 1000;

/**
 * Reads rows 0 to count - 1 of an HDU; a row at fault is added to `problems` and the next is read. After 1000 faulty
 * rows one last problem says that the rest was left.
 */
export function readRows(
  problems: Problem[],
  count: number,
  place: Place,
  read: (row: number, at: Place) => void,
): void {
  const before = problems.length;
  for (let row = 0; row < count; row++) {
    const at: Place = { ...place, row: row + 1 };
    collectProblem(problems, () => read(row, at));
    if (problems.length - before < MAX_FAULTY_ROWS || row === count - 1) continue;
    const rest = problemAt(
      { ...place, row: row + 2 },
      'too-many-faulty-rows',
      `${MAX_FAULTY_ROWS} rows are at fault, so the ${count - row - 1} rows from here on were not read.`,
      'Mend what the first problems say, and hand the file in again.',
    );
    problems.push(rest.problem);
    return;
  }
}

/** Spectra of one HDU that are read at most. */
const MAX_ROWS = 100_000;

/**
 * Refuses an HDU with more rows than are read.
 *
 * @throws InputProblem `too-many-rows`
 */
export function checkRowCount(count: number, place: Place): void {
  if (count <= MAX_ROWS) return;
  throw problemAt(
    place,
    'too-many-rows',
    `It has ${count} rows, each a spectrum.`,
    `At most ${MAX_ROWS} are read: hand it in as several files.`,
  );
}

import type { Problem } from '$lib/domain/input-problem';
import type { Instrument } from '$lib/domain/instrument';
import { collectProblem, problemAt, type Place } from './place';

/** What reading one file is about: its name, the instrument description, and where faults go. */
export interface ReadContext {
  file: string;
  instrument: Instrument | undefined;
  problems: Problem[];
  /** Whether a spectrum is asked for; `extension` counts from 0, `row` from 1. */
  wantsRow(extension: number, row: number): boolean;
  /** Set once something in the file is a spectrum, wanted or not, sound or not. */
  recognised: boolean;
}

/** Faulty rows of one HDU that are told one by one; beyond them the HDU itself is at fault. */
const MAX_FAULTY_ROWS = 1000;

/**
 * Reads the wanted rows of an HDU, 0 to count - 1; a row at fault is added to `problems` and the next is read. After 1000 faulty
 * rows one last problem says that the rest was left.
 */
export function readRows(
  context: ReadContext,
  count: number,
  place: Place,
  read: (row: number, at: Place) => void,
): void {
  const { problems } = context;
  context.recognised ||= count > 0;
  const before = problems.length;
  for (let row = 0; row < count; row++) {
    const at: Place = { ...place, row: row + 1 };
    if (!context.wantsRow(place.extension ?? 0, row + 1)) continue;
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

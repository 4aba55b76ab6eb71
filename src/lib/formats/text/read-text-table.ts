import type { Column, Table } from '../columns/table';
import { MAX_PIXELS } from '$lib/domain/check-raw-spectrum';
import { roleOfName } from '../columns/roles';
import { problemAt, type Place } from '../place';
import { parseUnit } from '../units/parse-unit';
import { readEcsvHeader } from './ecsv-header';
import { splitRows } from './split-rows';
import { cellNumber, TextColumn, type TextColumnWords } from './text-column';
import { headingsFromComments, readHeading, readRemarks } from './text-remarks';

const COMMENT = /^\s*(?:#|!|;|%|\/\/)\s?(.*)$/;
/** Names given to the columns of a bare table: common practice puts them in this order. */
const BARE_NAMES = ['wavelength', 'flux', 'error'];

function isHeadingRow(cells: string[]): boolean {
  const named = cells.filter((cell) => cell.trim() !== '');
  return (
    named.length > 0 &&
    named.every((cell) => cellNumber(cell) === undefined || Number.isNaN(cellNumber(cell))) &&
    named.some((cell) => cellNumber(cell) === undefined)
  );
}

function isUnitRow(cells: string[]): boolean {
  return (
    cells.some((cell) => cell.trim() !== '') &&
    cells.every((cell) => cellNumber(cell) === undefined && parseUnit(cell) !== null)
  );
}

/** Rows looked at to tell a table of numbers from prose. */
const LOOK_AT_ROWS = 50;

/** True where most rows have two numbers or more. */
function holdsNumbers(rows: string[][]): boolean {
  const numeric = rows.filter((cells) => cells.filter((cell) => Number.isFinite(cellNumber(cell))).length >= 2);
  return numeric.length > rows.length / 2;
}

/** Comments at the head of a text and, apart from them, the lines that hold data. */
function splitComments(text: string): { comments: string[]; lines: string[]; numbers: number[] } {
  const comments: string[] = [];
  const lines: string[] = [];
  const numbers: number[] = [];
  let number = 0;
  for (const line of text.split(/\r\n|\n|\r/)) {
    number++;
    const comment = COMMENT.exec(line);
    if (comment) comments.push(comment[1]);
    else if (line.trim() !== '') {
      lines.push(line);
      numbers.push(number);
    }
  }
  return { comments, lines, numbers };
}

/**
 * Reads a table out of text: CSV (RFC 4180, any of comma, semicolon, tab), ECSV 1.0, or columns set apart by blanks.
 * Comments begin with `#`, `!`, `;`, `%` or `//`; their `KEY = value` lines are header cards.
 *
 * @throws InputProblem where there is no table, rows differ in length, or a number can't be read where one must be.
 */
export function readTextTable(text: string, place: Place): { table: Table; warnings: string[] } {
  const { comments, lines, numbers } = splitComments(text);
  const ecsv = readEcsvHeader(comments, place);
  const remarks = readRemarks(ecsv ? [] : comments);
  if (ecsv) for (const [key, value] of ecsv.cards) remarks.cards.set(key, value);
  const rows = splitRows(lines, ecsv?.delimiter ?? null, place);
  if (rows.length > MAX_PIXELS) {
    throw problemAt(place, 'too-many-pixels', `The table has ${rows.length} rows.`, `At most ${MAX_PIXELS} are read.`);
  }
  let headings: TextColumnWords[] | null = null;
  let first = 0;
  if (rows.length > 0 && isHeadingRow(rows[0])) {
    headings = rows[0].map(readHeading);
    first = 1;
    if (!ecsv && rows.length > 1 && isUnitRow(rows[1])) {
      rows[1].forEach((unit, i) => headings![i] && (headings![i].unit ??= unit.trim()));
      first = 2;
    }
  }
  const count = rows[first]?.length ?? 0;
  if (count < 2 || !holdsNumbers(rows.slice(first, first + LOOK_AT_ROWS))) {
    throw problemAt(
      place,
      'not-a-spectrum-file',
      'This is neither FITS nor a table of numbers.',
      'Hand in FITS, CSV, ECSV, or columns of numbers for wavelength, flux and error.',
    );
  }
  const warnings: string[] = [];
  if (ecsv && ecsv.columns.length === count) headings = ecsv.columns;
  headings ??= headingsFromComments(comments, count);
  if (!headings) {
    headings = Array.from({ length: count }, (_, i) => readHeading(BARE_NAMES[i] ?? `column ${i + 1}`));
    warnings.push('The columns have no names and were taken for wavelength, flux and error, in this order.');
  }
  const words = headings;
  const columns = fillColumns(rows, first, words, numbers, place, warnings);
  for (const [role, unit] of Object.entries(remarks.units)) applyUnit(columns, role, unit);
  const table: Table = {
    extension: 0,
    name: '',
    rows: rows.length - first,
    columns: columns.map((column) => column.make()),
    cards: remarks.cards,
    remarks: remarks.sentences,
  };
  return { table, warnings };
}

interface ColumnDraft {
  words: TextColumnWords;
  make(): Column;
}

function applyUnit(columns: ColumnDraft[], role: string, unit: string): void {
  for (const { words } of columns) if (words.unit === null && roleOfName(words.name) === role) words.unit = unit;
}

function fillColumns(
  rows: string[][],
  first: number,
  words: TextColumnWords[],
  numbers: number[],
  place: Place,
  warnings: string[],
): ColumnDraft[] {
  const count = rows.length - first;
  const values = words.map(() => new Float64Array(count).fill(Number.NaN));
  const texts: (string[] | null)[] = words.map((_, i) =>
    rows[first] && cellNumber(rows[first][i] ?? '') === undefined ? [] : null,
  );
  let odd = 0;
  let oddLine = 0;
  for (let row = 0; row < count; row++) {
    const cells = rows[first + row];
    if (cells.length !== words.length) {
      if (cells.length > words.length || row < count - 1) {
        const detail = `line ${numbers[first + row] ?? '?'}`;
        throw problemAt(
          { ...place, detail },
          'row-length',
          `The row has ${cells.length} cells where ${words.length} are expected.`,
          'Give every row the same number of cells; an empty cell stands for a bad pixel.',
        );
      }
      warnings.push('The last row is cut and was left as a bad pixel.');
    }
    for (let i = 0; i < cells.length; i++) {
      if (texts[i]) texts[i]!.push(cells[i]);
      else {
        const value = cellNumber(cells[i]);
        if (value === undefined) {
          odd++;
          oddLine ||= numbers[first + row] ?? 0;
        } else values[i][row] = value;
      }
    }
  }
  if (odd > 0) warnings.push(`${odd} cells are no numbers (the first on line ${oddLine}); they count as bad pixels.`);
  return words.map((word, i) => ({ words: word, make: () => new TextColumn(word, values[i], texts[i]) }));
}

import { parse } from 'csv-parse/sync';
import { problemAt, type Place } from '../place';

/** Cells of a row that are looked at; a spectrum has a handful. */
const MAX_CELLS = 1000;

/** The character between cells: what the middle line uses most plainly; null for blanks. */
function findDelimiter(lines: string[]): string | null {
  const line = lines[lines.length >> 1] ?? '';
  // A semicolon beside commas sets apart numbers with decimal commas.
  for (const delimiter of [';', '\t', '|', ',']) if (line.includes(delimiter)) return delimiter;
  return null;
}

function parseQuoted(lines: string[], delimiter: string, place: Place): string[][] {
  try {
    return parse(lines.join('\n'), { delimiter, relax_column_count: true, skip_empty_lines: true, trim: true });
  } catch (error) {
    throw problemAt(
      place,
      'csv-quotes',
      `The quotes of the table do not match (${(error as Error).message.slice(0, 120)}).`,
      'Close every quote, or leave quotes out: a table of numbers needs none.',
    );
  }
}

/** Cells set apart by runs of blanks, where quotes keep blanks together: `1.5  ""  "two words"`. */
function splitBlanks(line: string): string[] {
  if (!line.includes('"')) return line.trim().split(/\s+/, MAX_CELLS);
  const cells = line.match(/"(?:[^"]|"")*"|[^\s"]\S*|"/g) ?? [];
  return cells.map((cell) =>
    cell.length > 1 && cell.startsWith('"') ? cell.slice(1, -1).replaceAll('""', '"') : cell,
  );
}

/**
 * Splits lines into cells. Quoted CSV goes through a CSV parser; lines without a quote are split directly, which is many
 * times faster for a table of numbers.
 */
export function splitRows(lines: string[], delimiter: string | null, place: Place): string[][] {
  const separator = delimiter === ' ' ? null : (delimiter ?? findDelimiter(lines));
  if (separator === null) return lines.map((line) => splitBlanks(line));
  if (lines.some((line) => line.includes('"'))) return parseQuoted(lines, separator, place);
  return lines.map((line) => line.split(separator, MAX_CELLS));
}

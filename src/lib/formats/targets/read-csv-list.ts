import { parse } from 'csv-parse/sync';
import { problemAt } from '../place';
import { parseUnit } from '../units/parse-unit';
import { MAX_HEADING_CHARACTERS, type ListColumn, type ListTable } from './list-table';

const HEADING = /^(.*?)\s*(?:[([]\s*([^)\]]*?)\s*[)\]])?\s*$/;
/** Units of angles, which the units of spectra do not know. */
const ANGLE =
  /^(deg(rees?)?|d|rad(ians?)?|h(ours?)?|hr|hourangle|"?h:m:s"?|"?d:m:s"?|arcsec|arcmin|mas|mag(nitudes?)?|ab ?mag|-|)$/i;

/** A heading as name and unit: `ra (deg)`, `RA [h]`; `ra_deg` is left to whoever looks at the names. */
function readHeading(text: string): ListColumn {
  const [, name, unit] = HEADING.exec(text.trim().slice(0, MAX_HEADING_CHARACTERS).trim())!;
  return { name, unit: unit ?? null, ucd: null };
}

const isUnitRow = (cells: string[]) =>
  cells.some((cell) => cell.trim() !== '') &&
  cells.every((cell) => ANGLE.test(cell.trim()) || (Number.isNaN(Number(cell)) && parseUnit(cell) !== null)) &&
  cells.some((cell) => /^(deg|h|rad)/i.test(cell.trim()));

function delimiterOf(line: string): string {
  return [';', '\t', '|', ','].find((delimiter) => line.includes(delimiter)) ?? ',';
}

/**
 * Reads a target list out of CSV (RFC 4180; comma, semicolon, tab or bar), with a row of headings, comments by `#`, and
 * a row of units under the headings if there is one.
 *
 * @throws InputProblem where quotes do not match or there are no headings.
 */
export function readCsvList(text: string, file: string): ListTable {
  const first = text.split(/\r\n|\n|\r/).find((line) => line.trim() !== '' && !line.startsWith('#')) ?? '';
  let records: { record: string[]; info: { lines: number } }[];
  try {
    records = parse(text, {
      bom: true,
      comment: '#',
      comment_no_infix: true,
      delimiter: delimiterOf(first),
      info: true,
      relax_column_count: true,
      skip_empty_lines: true,
      trim: true,
    }) as unknown as typeof records;
  } catch (error) {
    throw problemAt(
      { file },
      'csv-quotes',
      `The list cannot be split into cells (${(error as Error).message.slice(0, 120)}).`,
      'Close every quote, and put names with commas between quotes.',
    );
  }
  const heading = records[0]?.record ?? [];
  const hasHeadings = heading.length > 1 && heading.every((cell) => cell !== '' && Number.isNaN(Number(cell)));
  if (!hasHeadings) {
    throw problemAt(
      { file, detail: 'line 1' },
      'headings-missing',
      'The list has no row of headings.',
      'Name the columns on the first line, e.g. name,ra (deg),dec (deg),magnitude,priority.',
    );
  }
  const columns = heading.map(readHeading);
  const hasUnits = records.length > 1 && isUnitRow(records[1].record);
  if (hasUnits) records[1].record.forEach((unit, i) => columns[i] && (columns[i].unit ??= unit.trim() || null));
  const body = records.slice(hasUnits ? 2 : 1);
  return {
    columns,
    rows: body.map(({ record }) => record),
    places: body.map(({ info }) => `line ${info.lines}`),
    system: null,
  };
}

import type { Problem } from '$lib/domain/input-problem';
import { collectProblem, problemAt } from '../place';
import { findListColumns, type ListColumns } from './list-columns';
import { MAX_TARGETS, type ListTable } from './list-table';
import { angleOf, toDegrees, unitOfDeclination, unitOfRightAscension, type AngleUnit } from './read-angles';
import { readCsvList } from './read-csv-list';
import { readVotableList } from './read-votable-list';

/** One row of a target list. */
export interface ListedRow {
  /** Counted from 1, rows that were refused included. */
  row: number;
  name: string;
  raDegrees: number | null;
  decDegrees: number | null;
  /** The larger the more urgent. */
  priority: number | null;
  /** By band, as the heading names it, in the order of the columns. */
  magnitudes: Record<string, number>;
}

export interface TargetList {
  rows: ListedRow[];
  /** Rows that were refused, each with its place and how to mend it; the others stand. */
  problems: Problem[];
  /** Names of columns that are not kept. */
  ignored: string[];
  /** How right ascension was read; null where the list has no positions. */
  rightAscensionIn: AngleUnit | null;
}

const ISO_DATE = /^\d{4}-\d{2}-\d{2}[T ]\d{2}:\d{2}/;
const ZONE = /(Z|[+-]\d{2}:?\d{2}|\bUTC?)$/i;
const EMPTY = /^(nan|null|none|n\/a|--|-|)$/i;
/** Systems whose positions are ICRS to within 0.03 arcsec, or are it. */
const KNOWN_SYSTEM = /^(ICRS|FK5( (J?2000(\.0*)?))?|(eq_)?FK5 J2000(\.0)?)$/i;

/**
 * Reads a target list: CSV with headings, or VOTable. A row at fault is refused with its reason, and the rest stands.
 *
 * @throws InputProblem where the list cannot be read at all: no headings, broken XML, right ascension in nobody knows
 *   which unit, positions of an old equinox.
 */
export function readTargetList(bytes: Uint8Array, file: string): TargetList {
  const text = decode(bytes, file);
  const table = /^\s*<(\?xml|VOTABLE|[a-z]+:VOTABLE)/i.test(text)
    ? readVotableList(text, file)
    : readCsvList(text, file);
  if (table.rows.length === 0)
    throw problemAt({ file }, 'list-empty', 'The list has no rows.', 'Hand in one that has.');
  if (table.rows.length > MAX_TARGETS) {
    throw problemAt(
      { file },
      'list-long',
      `The list has ${table.rows.length} rows.`,
      `Hand in at most ${MAX_TARGETS} at a time.`,
    );
  }
  if (table.system && !KNOWN_SYSTEM.test(table.system.trim())) {
    throw problemAt(
      { file },
      'system-old',
      `The positions are in ${table.system}.`,
      'Give them in ICRS (or FK5, equinox 2000).',
    );
  }
  const columns = findListColumns(table, file);
  const cellsOf = (at: number) => table.rows.map((cells) => cells[at] ?? '');
  const raUnit =
    columns.ra === null ? null : unitOfRightAscension(table.columns[columns.ra], cellsOf(columns.ra), file);
  const problems: Problem[] = [];
  const rows = table.rows.flatMap((_, i) => {
    const row = collectProblem(problems, () => readRow(table, columns, raUnit, i, file));
    return row ? [row] : [];
  });
  return { rows, problems, ignored: columns.ignored, rightAscensionIn: raUnit };
}

function decode(bytes: Uint8Array, file: string): string {
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(bytes);
  } catch {
    throw problemAt({ file }, 'not-text', 'The list is not text in UTF-8.', 'Save it as CSV or VOTable in UTF-8.');
  }
}

function readRow(table: ListTable, columns: ListColumns, raUnit: AngleUnit | null, i: number, file: string): ListedRow {
  const cells = table.rows[i];
  const place = { file, detail: table.places[i] };
  const cell = (at: number | null) => (at === null ? '' : (cells[at] ?? '').trim());
  if (cells.length > table.columns.length) {
    throw problemAt(
      place,
      'row-length',
      `The row has ${cells.length} cells where ${table.columns.length} are expected.`,
      'Put names with commas between quotes.',
    );
  }
  for (const at of columns.dates) {
    if (ISO_DATE.test(cell(at)) && !ZONE.test(cell(at))) {
      throw problemAt(
        place,
        'date-zone',
        `The date ${cell(at)} has no zone.`,
        `Write ${cell(at).replace(' ', 'T')}Z if it is UTC.`,
      );
    }
  }
  const position = readPosition(cell(columns.ra), cell(columns.dec), table, columns, raUnit, place);
  const name = cell(columns.name);
  if (name === '' && position === null) {
    throw problemAt(place, 'target-nameless', 'The row has neither a name nor a position.', 'Give it one of them.');
  }
  const magnitudes: Record<string, number> = {};
  for (const { at, band } of columns.magnitudes) {
    const value = numberOf(cell(at), `magnitude ${band}`, place);
    if (value !== null) magnitudes[band] = value;
  }
  return {
    row: i + 1,
    name: (name || positionText(position!)).slice(0, 200),
    raDegrees: position?.ra ?? null,
    decDegrees: position?.dec ?? null,
    priority: numberOf(cell(columns.priority), 'priority', place),
    magnitudes,
  };
}

type At = { file: string; detail: string };

function numberOf(text: string, what: string, place: At): number | null {
  if (EMPTY.test(text)) return null;
  const value = Number(text);
  if (Number.isFinite(value)) return value;
  throw problemAt(
    place,
    'number-odd',
    `The ${what} "${text.slice(0, 40)}" is no number.`,
    'Write a number or nothing.',
  );
}

function readPosition(
  ra: string,
  dec: string,
  table: ListTable,
  columns: ListColumns,
  raUnit: AngleUnit | null,
  place: At,
) {
  if (EMPTY.test(ra) && EMPTY.test(dec)) return null;
  const [east, north] = [angleOf(ra), angleOf(dec)];
  if (!east || !north) {
    const [odd, name] = east ? [dec, 'declination'] : [ra, 'right ascension'];
    throw problemAt(
      place,
      'angle-odd',
      `The ${name} "${odd.slice(0, 40)}" is no angle.`,
      'Write 63.1525 or 04:12:36.6.',
    );
  }
  const unit = raUnit!;
  const raDegrees = toDegrees(east.value, unit);
  const decDegrees = toDegrees(north.value, unitOfDeclination(table.columns[columns.dec!]));
  if (unit === 'hours' && east.value >= 24) {
    throw problemAt(
      place,
      'ra-not-hours',
      `A right ascension of ${ra} is no hours.`,
      'If the column is in degrees, say so in its heading.',
    );
  }
  if (raDegrees < -180 || raDegrees > 360) {
    throw problemAt(
      place,
      'ra-range',
      `A right ascension of ${ra} ${unit} is out of range.`,
      'Give 0 to 360 degrees, or 0 to 24 hours.',
    );
  }
  if (Math.abs(decDegrees) > 90) {
    throw problemAt(place, 'dec-range', `A declination of ${dec} is out of range.`, 'Give -90 to 90 degrees.');
  }
  return { ra: raDegrees < 0 ? raDegrees + 360 : raDegrees === 360 ? 0 : raDegrees, dec: decDegrees };
}

const positionText = ({ ra, dec }: { ra: number; dec: number }) =>
  `${ra.toFixed(5)} ${dec < 0 ? '' : '+'}${dec.toFixed(5)}`;

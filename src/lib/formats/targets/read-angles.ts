import { problemAt } from '../place';
import type { ListColumn } from './list-table';

/** How the numbers of a column of angles are to be read. */
export type AngleUnit = 'degrees' | 'hours' | 'radians';

const SEXAGESIMAL = /^([+-]?)\s*(\d{1,3})\s*[:hd°\s]\s*(\d{1,2})\s*[:m'′\s]\s*(\d{1,2}(?:\.\d*)?)\s*[s"″]?$/i;
/** Longer than any angle is written; the pattern's time grows with more than the length. */
const MAX_CHARACTERS = 64;
const UNITS: [RegExp, AngleUnit][] = [
  [/^(h|hr|hours?|hourangle|"?h:m:s"?)$/i, 'hours'],
  [/^(d|deg|degrees?|"?d:m:s"?)$/i, 'degrees'],
  [/^(rad|radians?)$/i, 'radians'],
];
const SUFFIX: [RegExp, AngleUnit][] = [
  [/(^|[\s_.-])(h|hr|hours?)$/i, 'hours'],
  [/(^|[\s_.-])(d|deg|degrees?)$/i, 'degrees'],
  [/(^|[\s_.-])(rad|radians?)$/i, 'radians'],
];

/** A cell as a number in the column's own unit: `12.5`, `10:31:22.1`, `10h31m22.1s`; undefined where it is neither. */
export function angleOf(cell: string): { value: number; isSexagesimal: boolean } | undefined {
  const text = cell.replace(/[\u2212\u2013]/g, '-').trim();
  if (text.length > MAX_CHARACTERS) return undefined;
  const parts = SEXAGESIMAL.exec(text);
  if (parts) {
    if (Number(parts[3]) >= 60 || Number(parts[4]) >= 60) return undefined;
    const size = Number(parts[2]) + Number(parts[3]) / 60 + Number(parts[4]) / 3600;
    return { value: parts[1] === '-' ? -size : size, isSexagesimal: true };
  }
  const value = Number(text);
  return text !== '' && Number.isFinite(value) ? { value, isSexagesimal: false } : undefined;
}

/**
 * The unit of a column of right ascensions: what the unit or the end of the heading says; hours where it is written
 * sexagesimally, as right ascension always is; degrees where a number is over 24, which hours cannot be.
 *
 * @throws InputProblem where nothing tells degrees from hours.
 */
export function unitOfRightAscension(column: ListColumn, cells: readonly string[], file: string): AngleUnit {
  const said = unitSaid(column);
  if (said) return said;
  const angles = cells.map(angleOf).filter((angle) => angle !== undefined);
  if (angles.length > 0 && angles.every(({ isSexagesimal }) => isSexagesimal)) return 'hours';
  if (angles.some(({ value, isSexagesimal }) => !isSexagesimal && value > 24)) return 'degrees';
  throw problemAt(
    { file, detail: `column ${column.name}` },
    'ra-unit-unknown',
    `Nothing tells whether "${column.name}" is in degrees or in hours: it has no unit, and no value is over 24.`,
    `Write the unit into the heading: "${column.name} (deg)" or "${column.name} (h)".`,
  );
}

/** The unit of a column of declinations: degrees unless it says radians. */
export function unitOfDeclination(column: ListColumn): AngleUnit {
  return unitSaid(column) === 'radians' ? 'radians' : 'degrees';
}

function unitSaid({ name, unit }: ListColumn): AngleUnit | null {
  const text = unit?.trim();
  if (text) return UNITS.find(([pattern]) => pattern.test(text))?.[1] ?? null;
  return SUFFIX.find(([pattern]) => pattern.test(name.trim()))?.[1] ?? null;
}

/** Degrees of a value in a unit. */
export function toDegrees(value: number, unit: AngleUnit): number {
  if (unit === 'hours') return value * 15;
  return unit === 'radians' ? (value * 180) / Math.PI : value;
}

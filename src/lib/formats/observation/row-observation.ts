import { plainName } from '../columns/roles';
import type { Column, Table } from '../columns/table';
import { readAngle, type Observation } from './read-observation';

const NAME_COLUMNS = [
  'object',
  'objectname',
  'name',
  'target',
  'targetname',
  'targetid',
  'objid',
  'source',
  'id',
  'fibre',
  'fiber',
];
const RA_COLUMNS = ['ra', 'raj2000', 'raicrs', 'targetra', 'radeg', 'radegrees'];
const DEC_COLUMNS = ['dec', 'decj2000', 'dej2000', 'deicrs', 'decicrs', 'targetdec', 'decdeg', 'decdegrees'];

function find(table: Table, ucd: RegExp, names: readonly string[]): Column | null {
  const scalar = table.columns.filter((column) => !column.isVector);
  for (const name of names) {
    const named = scalar.find((column) => plainName(column.name) === name);
    if (named) return named;
  }
  return scalar.find((column) => column.ucd !== null && ucd.test(column.ucd.toLowerCase())) ?? null;
}

function angle(column: Column | null, row: number, hours: boolean): number | null {
  if (!column) return null;
  return readAngle(column.holds === 'text' ? column.text(row) : column.cell(row)[0], hours && column.holds === 'text');
}

/** True where a table tells one row's name or position from another's. */
export function tellsRows(table: Table): boolean {
  return find(table, /^pos\.eq\.ra/, RA_COLUMNS) !== null || find(table, /^meta\.id/, NAME_COLUMNS) !== null;
}

/** The observation of one row (counted from 0): name and position from the row's columns where it has them. */
export function rowObservation(observation: Observation, table: Table, row: number): Observation {
  const name = find(table, /^meta\.id/, NAME_COLUMNS)?.text(row) ?? observation.name;
  const ra = angle(find(table, /^pos\.eq\.ra/, RA_COLUMNS), row, true);
  const dec = angle(find(table, /^pos\.eq\.dec/, DEC_COLUMNS), row, false);
  if (ra === null || dec === null) return { ...observation, name };
  return { ...observation, name, raDegrees: ra, decDegrees: dec };
}

import type { ShapeColumn, ShapePart } from '$lib/domain/file-shape';
import type { Problem } from '$lib/domain/input-problem';
import { assignRoles, roleOfName } from './columns/roles';
import type { Column, Table } from './columns/table';
import { imageName } from './fits/image-spectra';
import { looksLikeFits, readHdus, type Hdu } from './fits/read-hdus';
import { readPixels } from './fits/read-image';
import { readTable } from './fits/read-table';
import { inflateGzip, looksLikeGzip } from './inflate';
import { collectProblem } from './place';
import { readTextTable } from './text/read-text-table';

/** Values shown of a column. */
const SHOWN = 5;

const numberText = (value: number) => (Number.isFinite(value) ? String(Number(value.toPrecision(7))) : 'no value');

function firstValues(column: Column, rows: number): { first: string[]; length: number } {
  const scalars = Math.min(SHOWN, rows);
  if (column.holds === 'text') {
    return { first: Array.from({ length: scalars }, (_, i) => column.text(i) ?? ''), length: rows };
  }
  if (!column.isVector) return { first: Array.from(column.scalars().subarray(0, SHOWN), numberText), length: rows };
  const cell = rows > 0 ? column.cell(0) : new Float64Array(0);
  return { first: Array.from(cell.subarray(0, SHOWN), numberText), length: cell.length };
}

function describeTable(table: Table, isText: boolean): ShapePart {
  const guessed = new Map(Object.entries(assignRoles(table).columns).map(([role, column]) => [column, role]));
  const columns = table.columns.map((column): ShapeColumn => {
    const { name, unit, description, holds } = column;
    return { name, unit, description, holds, ...firstValues(column, table.rows), guess: guessed.get(column) ?? null };
  });
  const label = isText ? 'the table' : `HDU ${table.extension}${table.name ? ` ${table.name}` : ''}`;
  return { kind: 'table', extension: table.extension, label, columns };
}

function describeImage(hdu: Hdu): ShapeColumn {
  const count = hdu.axes.reduce((product, length) => product * length, 1);
  return {
    name: imageName(hdu),
    unit: hdu.cards.own('BUNIT') ? hdu.cards.text('BUNIT') : null,
    description: hdu.axes.join(' x ') + ' pixels',
    holds: 'numbers',
    length: hdu.axes[0] ?? 0,
    first: Array.from(readPixels(hdu, 0, Math.min(SHOWN, count)), numberText),
    guess: roleOfName(hdu.name),
  };
}

/**
 * The columns of every table of a file, and its images as if they were columns, with units and first values, whether or
 * not they can be told. What cannot be read is left out; a file that holds neither gives none.
 */
export function describeColumns(bytes: Uint8Array, fileName: string): ShapePart[] {
  const unread: Problem[] = [];
  const plain = looksLikeGzip(bytes) ? collectProblem(unread, () => inflateGzip(bytes, { file: fileName })) : bytes;
  if (!plain) return [];
  if (!looksLikeFits(plain)) {
    const read = collectProblem(unread, () => readTextTable(new TextDecoder().decode(plain), { file: fileName }));
    return read ? [describeTable(read.table, true)] : [];
  }
  const hdus = collectProblem(unread, () => readHdus(plain, fileName, unread)) ?? [];
  const parts: ShapePart[] = [];
  for (const hdu of hdus) {
    if (hdu.kind !== 'binary table' && hdu.kind !== 'ascii table') continue;
    const part = collectProblem(unread, () => describeTable(readTable(hdu, fileName), false));
    if (part && part.columns.length > 0) parts.push(part);
  }
  const images = hdus.filter((hdu) => hdu.kind === 'image' && hdu.axes.length > 0 && !hdu.axes.includes(0));
  const columns = images.flatMap((hdu) => collectProblem(unread, () => describeImage(hdu)) ?? []);
  // All images of a file are named by an assignment, so one that cannot be described leaves none.
  if (columns.length > 0 && columns.length === images.length) {
    parts.push({ kind: 'images', extension: images[0].extension, label: 'the images', columns });
  }
  return parts;
}

/** Codes of problems that an assignment mends. */
const MENDED = new Set([
  'table-without-wavelength',
  'table-without-flux',
  'image-without-wavelength',
  'unit-missing',
  'unit-unknown',
]);

/** True where a file gave no spectrum just because its columns, axis or units could not be told. */
export function needsAssignment(spectra: number, problems: readonly Problem[]): boolean {
  return spectra === 0 && problems.length > 0 && problems.every(({ code }) => MENDED.has(code));
}

/** One value of a table; null where it is not known. */
export type Cell = string | number | null;

/** A text that a spreadsheet would run as a formula when it opens the file. */
const FORMULA = /^[=+\-@\t\r]/;
const QUOTED = /[",\r\n]/;

/**
 * One record of RFC 4180, its line end included. Numbers are written so that reading them gives back the same double
 * (ECMAScript's shortest form); what is not known, NaN and infinity are empty. Text that begins with `=`, `+`, `-`,
 * `@`, a tab or a carriage return gets an apostrophe before it, so that no spreadsheet takes it for a formula.
 */
export function csvRecord(cells: readonly Cell[]): string {
  return `${cells.map(csvField).join(',')}\r\n`;
}

function csvField(cell: Cell): string {
  if (cell === null) return '';
  if (typeof cell === 'number') return Number.isFinite(cell) ? String(cell) : '';
  const text = FORMULA.test(cell) ? `'${cell}` : cell;
  return QUOTED.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
}

import type { TableColumn } from '$lib/domain/release-columns';
import type { Cell } from './write-csv';

/** The namespace stayed that of 1.3 when VOTable 1.4 came. */
const OPENING =
  '<?xml version="1.0" encoding="UTF-8"?>\n<VOTABLE version="1.4" xmlns="http://www.ivoa.net/xml/VOTable/v1.3">\n';

export interface VotableHead {
  /** Name of the table: letters, digits, underscores. */
  tableName: string;
  description: string;
  columns: readonly TableColumn[];
  /** Name and value of INFO elements beside QUERY_STATUS. */
  infos?: readonly (readonly [name: string, value: string])[];
}

/** Characters that XML 1.0 (section 2.2) has no place for become U+FFFD. */
function escaped(text: string): string {
  return text

    .replace(/[\u0000-\u0008\u000b\u000c\u000e-\u001f\ufffe\uffff]|\p{Surrogate}/gu, '\ufffd')
    .replaceAll('&', '&amp;')
    .replaceAll('<', '&lt;')
    .replaceAll('>', '&gt;')
    .replaceAll('"', '&quot;')
    .replace(/[\t\n\r]/g, (c) => `&#${c.charCodeAt(0)};`);
}

function field({ name, datatype, unit, ucd, description }: TableColumn): string {
  const size = datatype === 'char' ? ' arraysize="*"' : '';
  const measure = unit ? ` unit="${escaped(unit)}"` : '';
  const frame = unit === 'deg' ? ' ref="icrs"' : '';
  return (
    `<FIELD name="${name}" ID="${name}" datatype="${datatype}"${size}${measure} ucd="${ucd}"${frame}>` +
    `<DESCRIPTION>${escaped(description)}</DESCRIPTION></FIELD>\n`
  );
}

/**
 * Everything of a VOTable 1.4 document before its first row: one RESOURCE of type results with one TABLE. Columns in
 * degrees are positions in ICRS.
 */
export function votableHead({ tableName, description, columns, infos = [] }: VotableHead): string {
  const more = infos.map(([name, value]) => `<INFO name="${escaped(name)}" value="${escaped(value)}"/>\n`).join('');
  return (
    `${OPENING}<RESOURCE type="results">\n<DESCRIPTION>${escaped(description)}</DESCRIPTION>\n` +
    `<INFO name="QUERY_STATUS" value="OK"/>\n${more}<COOSYS ID="icrs" system="ICRS"/>\n` +
    `<TABLE name="${tableName}">\n${columns.map(field).join('')}<DATA><TABLEDATA>\n`
  );
}

/** One row in TABLEDATA. What is not known is an empty cell, which a reader takes for null. */
export function votableRow(cells: readonly Cell[]): string {
  const text = (cell: Cell) =>
    cell === null || (typeof cell === 'number' && !Number.isFinite(cell)) ? '' : escaped(String(cell));
  return `<TR>${cells.map((cell) => `<TD>${text(cell)}</TD>`).join('')}</TR>\n`;
}

/** What follows the last row. */
export const votableTail = '</TABLEDATA></DATA>\n</TABLE>\n</RESOURCE>\n</VOTABLE>\n';

/**
 * A document that says why there is no table: INFO named Error as child of VOTABLE (Simple Cone Search 1.03, section
 * 2.3), and QUERY_STATUS ERROR for clients that know DALI.
 */
export function votableError(message: string): string {
  const text = escaped(message);
  return (
    `${OPENING}<INFO ID="Error" name="Error" value="${text}"/>\n` +
    `<RESOURCE type="results">\n<INFO name="QUERY_STATUS" value="ERROR">${text}</INFO>\n</RESOURCE>\n</VOTABLE>\n`
  );
}

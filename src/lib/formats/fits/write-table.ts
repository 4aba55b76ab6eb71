import { formatHeader, joinBytes, padBlock, type OutputCard } from './write-header';

/** A column to write: numbers (D double, E single, J integer) or text (A), one a row or `repeat` of them. */
export interface OutputColumn {
  name: string;
  form: 'D' | 'E' | 'J' | 'A';
  values: ArrayLike<number> | readonly string[];
  /** Values a row; letters a cell for text. */
  repeat?: number;
  unit?: string | null;
  ucd?: string;
  description?: string;
}

const BYTES = { D: 8, E: 4, J: 4, A: 1 };
/** TNULL of integer columns: what NaN is written as. */
const NO_INTEGER = -2_147_483_648;

function widthOf(column: OutputColumn): number {
  return BYTES[column.form] * (column.repeat ?? 1);
}

function writeCell(view: DataView, at: number, column: OutputColumn, row: number): void {
  const repeat = column.repeat ?? 1;
  if (column.form === 'A') {
    const text = (column.values as readonly string[])[row] ?? '';
    for (let i = 0; i < repeat; i++) {
      const code = i < text.length ? text.charCodeAt(i) : 0x20;
      view.setUint8(at + i, code >= 0x20 && code < 0x7f ? code : 0x3f);
    }
    return;
  }
  const values = column.values as ArrayLike<number>;
  for (let i = 0; i < repeat; i++) {
    const value = values[row * repeat + i];
    if (column.form === 'D') view.setFloat64(at + 8 * i, value);
    else if (column.form === 'E') view.setFloat32(at + 4 * i, value);
    else view.setInt32(at + 4 * i, Number.isFinite(value) ? value : NO_INTEGER);
  }
}

function columnCards(column: OutputColumn, n: number): OutputCard[] {
  const repeat = column.repeat ?? 1;
  const cards: OutputCard[] = [
    { keyword: `TTYPE${n}`, value: column.name },
    { keyword: `TFORM${n}`, value: `${repeat === 1 ? '' : repeat}${column.form}` },
  ];
  if (column.unit) cards.push({ keyword: `TUNIT${n}`, value: column.unit });
  if (column.form === 'J') cards.push({ keyword: `TNULL${n}`, value: NO_INTEGER });
  if (column.ucd) cards.push({ keyword: `TUCD${n}`, value: column.ucd });
  if (column.description) cards.push({ keyword: `TCOMM${n}`, value: column.description });
  return cards;
}

/** A binary table extension (FITS 4.0, section 7.3) with its header and data. */
export function tableExtension(columns: OutputColumn[], rows: number, cards: OutputCard[]): Uint8Array {
  const rowBytes = columns.reduce((sum, column) => sum + widthOf(column), 0);
  const data = new Uint8Array(rowBytes * rows);
  const view = new DataView(data.buffer);
  let offset = 0;
  for (const column of columns) {
    for (let row = 0; row < rows; row++) writeCell(view, row * rowBytes + offset, column, row);
    offset += widthOf(column);
  }
  const header = formatHeader([
    { keyword: 'XTENSION', value: 'BINTABLE' },
    { keyword: 'BITPIX', value: 8 },
    { keyword: 'NAXIS', value: 2 },
    { keyword: 'NAXIS1', value: rowBytes },
    { keyword: 'NAXIS2', value: rows },
    { keyword: 'PCOUNT', value: 0 },
    { keyword: 'GCOUNT', value: 1 },
    { keyword: 'TFIELDS', value: columns.length },
    ...columns.flatMap((column, i) => columnCards(column, i + 1)),
    ...cards,
  ]);
  return joinBytes([header, padBlock(data)]);
}

/** A primary header without data, before extensions. */
export function emptyPrimary(cards: OutputCard[]): Uint8Array {
  return formatHeader([
    { keyword: 'SIMPLE', value: true },
    { keyword: 'BITPIX', value: 8 },
    { keyword: 'NAXIS', value: 0 },
    { keyword: 'EXTEND', value: true },
    ...cards,
  ]);
}

/** An image of double-precision values: the primary one, or an extension where it has a name. */
export function imageUnit(
  values: ArrayLike<number>,
  axes: number[],
  name: string | null,
  cards: OutputCard[],
): Uint8Array {
  const data = new Uint8Array(values.length * 8);
  const view = new DataView(data.buffer);
  for (let i = 0; i < values.length; i++) view.setFloat64(8 * i, values[i]);
  const header = formatHeader([
    name === null ? { keyword: 'SIMPLE', value: true } : { keyword: 'XTENSION', value: 'IMAGE' },
    { keyword: 'BITPIX', value: -64 },
    { keyword: 'NAXIS', value: axes.length },
    ...axes.map((length, i) => ({ keyword: `NAXIS${i + 1}`, value: length })),
    ...(name === null
      ? [{ keyword: 'EXTEND', value: true }]
      : [
          { keyword: 'PCOUNT', value: 0 },
          { keyword: 'GCOUNT', value: 1 },
          { keyword: 'EXTNAME', value: name },
        ]),
    ...cards,
  ]);
  return joinBytes([header, padBlock(data)]);
}

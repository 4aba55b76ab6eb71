import type { Cards } from '../cards';
import type { Place } from '../place';
import type { BinaryColumn } from './binary-column';
import type { Hdu } from './read-hdus';
import { readTable } from './read-table';
import { decodeRice } from './rice';
import { elementBytes, parseBinaryFormat } from './table-format';
import { checkUnpackedSize, inflateTile, notUncompressed } from './uncompress';

const INTEGER_BYTES: Record<string, number> = { B: 1, I: 2, J: 4 };

interface PackedColumn {
  packed: BinaryColumn;
  algorithm: string;
  type: string;
  /** Bytes of a cell and of one of its elements. */
  width: number;
  element: number;
  offset: number;
}

function whole(cards: Cards, keyword: string, place: Place): number {
  const value = cards.own(keyword) ? cards.number(keyword) : null;
  if (value === null || !Number.isSafeInteger(value) || value < 0)
    throw notUncompressed(place, `${keyword} is missing or not valid`);
  return value;
}

function unpackTile(column: PackedColumn, bytes: Uint8Array, rows: number, place: Place): Uint8Array {
  const expected = rows * column.width;
  if (expected === 0) return new Uint8Array(0);
  if (column.algorithm === 'NOCOMPRESS' && bytes.length === expected) return bytes;
  if (column.algorithm === 'GZIP_1' || column.algorithm === 'GZIP_2') {
    return inflateTile(bytes, column.algorithm, expected, column.element, place);
  }
  const size = INTEGER_BYTES[column.type];
  if (column.algorithm !== 'RICE_1' || !size)
    throw notUncompressed(place, `its method ${column.algorithm} is not read`);
  const values = decodeRice(bytes, expected / size, size, 32, place);
  const tile = new Uint8Array(expected);
  const view = new DataView(tile.buffer);
  values.forEach((value, i) => {
    if (size === 1) view.setUint8(i, value);
    else if (size === 2) view.setInt16(2 * i, value);
    else view.setInt32(4 * i, value);
  });
  return tile;
}

/**
 * Turns a tile-compressed table (FITS 4.0, section 10.3) into the table that it was.
 *
 * @throws InputProblem where a method is not read, sizes are hostile, or a tile is damaged
 */
export function uncompressTable(hdu: Hdu, file: string): Hdu {
  const place: Place = { file, extension: hdu.extension };
  const rowBytes = whole(hdu.cards, 'ZNAXIS1', place);
  const rows = whole(hdu.cards, 'ZNAXIS2', place);
  const tileRows = Math.max(1, hdu.cards.number('ZTILELEN') ?? rows);
  checkUnpackedSize(rowBytes * rows, hdu.data.length, place);
  const table = readTable(hdu, file);
  if (rows > hdu.data.length * 1000 || Math.ceil(rows / tileRows) > table.rows)
    throw notUncompressed(place, 'it has fewer tiles than its rows need');

  const forms: Record<string, string> = {};
  const columns: PackedColumn[] = [];
  let offset = 0;
  table.columns.forEach((packed, i) => {
    const form = hdu.cards.text(`ZFORM${i + 1}`) ?? '';
    const format = parseBinaryFormat(form, { ...place, detail: `column ${i + 1}` });
    if (format.heapType) throw notUncompressed(place, 'its variable-length columns are not read');
    const algorithm = (hdu.cards.text(`ZCTYP${i + 1}`) ?? 'GZIP_2').toUpperCase();
    columns.push({
      packed: packed as BinaryColumn,
      algorithm,
      type: format.type,
      width: format.width,
      element: Math.max(1, elementBytes(format.type)),
      offset,
    });
    forms[`TFORM${i + 1}`] = form;
    offset += format.width;
  });
  if (offset > rowBytes) throw notUncompressed(place, 'its columns are wider than ZNAXIS1');

  const data = new Uint8Array(rowBytes * rows);
  for (let tile = 0, first = 0; first < rows; tile++, first += tileRows) {
    const count = Math.min(tileRows, rows - first);
    for (const column of columns) {
      const bytes = unpackTile(column, column.packed.bytes(tile), count, place);
      for (let row = 0; row < count && column.width > 0; row++) {
        data.set(
          bytes.subarray(row * column.width, (row + 1) * column.width),
          (first + row) * rowBytes + column.offset,
        );
      }
    }
  }
  return { ...hdu, kind: 'binary table', cards: hdu.cards.with(forms), axes: [rowBytes, rows], data };
}

import type { Cards } from '../cards';
import type { Column } from '../columns/table';
import type { Place } from '../place';
import { BinaryColumn } from './binary-column';
import { Dither } from './dither';
import type { Hdu } from './read-hdus';
import { READERS } from './read-image';
import { readTable } from './read-table';
import { decodeRice } from './rice';
import { checkUnpackedSize, inflateTile, notUncompressed } from './uncompress';

/** Quantised values that stand for undefined pixels and, with the second dither, for exact zeros. */
const UNDEFINED = -2147483647;
const EXACT_ZERO = -2147483646;

interface Packing {
  place: Place;
  algorithm: string;
  /** ZBITPIX, and that of what is packed: 32-bit integers where floats were quantised. */
  bitpix: number;
  stored: number;
  block: number;
  pixelBytes: number;
  quantised: boolean;
  dither: 0 | 1 | 2;
  seed: number;
  blank: number | null;
}

function whole(cards: Cards, keyword: string, fallback: number | null, place: Place): number {
  const value = (cards.own(keyword) ? cards.number(keyword) : null) ?? fallback;
  if (value === null || !Number.isSafeInteger(value) || value < 0)
    throw notUncompressed(place, `${keyword} is missing or not valid`);
  return value;
}

/** Parameters of the algorithm: ZNAMEi and ZVALi. */
function parameter(cards: Cards, name: string): number | null {
  for (let i = 1; i <= 10; i++) if (cards.text(`ZNAME${i}`)?.toUpperCase() === name) return cards.number(`ZVAL${i}`);
  return null;
}

function readPacking(hdu: Hdu, columns: Column[], place: Place): Packing {
  const { cards } = hdu;
  const bitpix = cards.number('ZBITPIX') ?? 0;
  if (!(bitpix in READERS)) throw notUncompressed(place, 'ZBITPIX is missing or not valid');
  const quantised = bitpix < 0 && (columns.some((column) => column.name === 'ZSCALE') || cards.own('ZSCALE'));
  const method = cards.text('ZQUANTIZ')?.toUpperCase() ?? '';
  return {
    place,
    algorithm: (cards.text('ZCMPTYPE') ?? '').toUpperCase(),
    bitpix,
    stored: quantised ? 32 : bitpix,
    block: parameter(cards, 'BLOCKSIZE') ?? 32,
    pixelBytes: parameter(cards, 'BYTEPIX') ?? 4,
    quantised,
    dither: method === 'SUBTRACTIVE_DITHER_1' ? 1 : method === 'SUBTRACTIVE_DITHER_2' ? 2 : 0,
    seed: cards.number('ZDITHER0') ?? 1,
    blank: cards.own('ZBLANK') ? cards.number('ZBLANK') : null,
  };
}

/** Stored values of a tile's bytes, big-endian. */
function toNumbers(bytes: Uint8Array, bitpix: number): Float64Array {
  const { bytes: size, read } = READERS[bitpix];
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  return Float64Array.from({ length: bytes.length / size }, (_, i) => read(view, i * size));
}

function unpackTile(columns: Column[], tile: number, count: number, packing: Packing): Float64Array {
  const bytesOf = (name: string) => {
    const column = columns.find((candidate) => candidate.name === name);
    return column instanceof BinaryColumn ? column.bytes(tile) : new Uint8Array(0);
  };
  const { place, algorithm, stored } = packing;
  const packed = bytesOf('COMPRESSED_DATA');
  const gzipped = bytesOf('GZIP_COMPRESSED_DATA');
  if (packed.length === 0 && gzipped.length > 0) {
    // A tile that could not be quantised is kept as it was.
    const size = Math.abs(packing.bitpix) / 8;
    return toNumbers(inflateTile(gzipped, 'GZIP_1', count * size, size, place), packing.bitpix);
  }
  if (algorithm === 'GZIP_1' || algorithm === 'GZIP_2') {
    const size = Math.abs(stored) / 8;
    return toNumbers(inflateTile(packed, algorithm, count * size, size, place), stored);
  }
  if (algorithm === 'RICE_1' || algorithm === 'RICE_ONE') {
    const values = decodeRice(packed, count, packing.pixelBytes, packing.block, place);
    return Float64Array.from(values, (value) => (packing.pixelBytes === 1 ? value & 255 : value));
  }
  throw notUncompressed(place, `its method ${algorithm || 'is not said'} is not read`);
}

/** Undoes the quantisation: value = (stored - dither + 0.5) ZSCALE + ZZERO (FITS 4.0, section 10.2). */
function dequantise(values: Float64Array, tile: number, scale: number, zero: number, packing: Packing): void {
  const dither = packing.dither === 0 ? null : new Dither(tile, packing.seed);
  const blank = packing.blank ?? UNDEFINED;
  for (let i = 0; i < values.length; i++) {
    const shift = dither ? 0.5 - dither.next() : 0;
    if (values[i] === blank) values[i] = Number.NaN;
    else if (packing.dither === 2 && values[i] === EXACT_ZERO) values[i] = 0;
    else values[i] = (values[i] + shift) * scale + zero;
  }
}

/**
 * Turns a tile-compressed image (FITS 4.0, section 10.1) into the image that it was: RICE_1, GZIP_1 and GZIP_2, floats
 * quantised with or without dither. Images of up to two axes, which is what spectra and their stacks are.
 *
 * @throws InputProblem where the method is not read, sizes are hostile, or a tile is damaged
 */
export function uncompressImage(hdu: Hdu, file: string): Hdu {
  const place: Place = { file, extension: hdu.extension };
  const axes = Array.from({ length: Math.min(99, whole(hdu.cards, 'ZNAXIS', null, place)) }, (_, i) =>
    whole(hdu.cards, `ZNAXIS${i + 1}`, null, place),
  );
  if (axes.length === 0 || axes.length > 2) throw notUncompressed(place, `it has ${axes.length} axes`);
  const [columns = 1, rows = 1] = axes;
  checkUnpackedSize(columns * rows * 8, hdu.data.length * 8, place);
  const tileWidth = Math.max(1, whole(hdu.cards, 'ZTILE1', columns, place));
  const tileHeight = Math.max(1, whole(hdu.cards, 'ZTILE2', 1, place));
  const table = readTable({ ...hdu, kind: 'binary table' }, file);
  const across = Math.ceil(columns / tileWidth);
  const tiles = across * Math.ceil(rows / tileHeight);
  if (tiles > table.rows) throw notUncompressed(place, `it has ${table.rows} tiles where ${tiles} are needed`);
  const packing = readPacking(hdu, table.columns, place);
  const perTile = (name: string, fallback: number) =>
    table.columns.find((column) => column.name === name)?.scalars() ??
    new Float64Array(tiles).fill(hdu.cards.number(name) ?? fallback);
  const scales = perTile('ZSCALE', 1);
  const zeros = perTile('ZZERO', 0);

  const data = new Uint8Array(columns * rows * 8);
  const view = new DataView(data.buffer);
  for (let tile = 0; tile < tiles; tile++) {
    const x = (tile % across) * tileWidth;
    const y = Math.floor(tile / across) * tileHeight;
    const width = Math.min(tileWidth, columns - x);
    const height = Math.min(tileHeight, rows - y);
    const values = unpackTile(table.columns, tile, width * height, packing);
    const isPacked = packedLength(table.columns, tile) > 0;
    if (packing.quantised && isPacked) dequantise(values, tile, scales[tile], zeros[tile], packing);
    else if (packing.bitpix > 0 && packing.blank !== null) replaceBlank(values, packing.blank);
    values.forEach((value, i) => view.setFloat64(8 * ((y + Math.floor(i / width)) * columns + x + (i % width)), value));
  }
  const name = hdu.name === 'COMPRESSED_IMAGE' ? '' : hdu.name;
  return { ...hdu, kind: 'image', name, bitpix: -64, axes, data };
}

function packedLength(columns: Column[], tile: number): number {
  const column = columns.find((candidate) => candidate.name === 'COMPRESSED_DATA');
  return column instanceof BinaryColumn ? column.bytes(tile).length : 0;
}

function replaceBlank(values: Float64Array, blank: number): void {
  for (let i = 0; i < values.length; i++) if (values[i] === blank) values[i] = Number.NaN;
}

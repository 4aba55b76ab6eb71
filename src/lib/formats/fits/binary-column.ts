import type { Column } from '../columns/table';
import { problemAt, type Place } from '../place';
import { READERS, type NumberReader } from './read-image';
import { elementBytes, type BinaryFormat } from './table-format';

/** Where the rows and the heap of a binary table lie in its data. */
export interface BinaryLayout {
  data: Uint8Array;
  rowBytes: number;
  rows: number;
  heapStart: number;
}

/** What the header says of one column. */
export interface ColumnCards {
  name: string;
  unit: string | null;
  ucd: string | null;
  utype: string | null;
  description: string | null;
  coordinateType: string | null;
  scale: number;
  zero: number;
  /** Stored integer that marks an undefined value. */
  undefinedInteger: number | null;
}

const BITPIX_OF_TYPE: Record<string, number> = { B: 8, I: 16, J: 32, K: 64, E: -32, D: -64 };
/** Times that a whole heap may be read, all cells of a column together. */
const MAX_HEAP_READS = 4;
const LATIN1 = new TextDecoder('latin1');

function numberReader(type: string): NumberReader | null {
  if (type === 'L') {
    return (view, offset) => {
      const letter = view.getUint8(offset);
      return letter === 0x54 ? 1 : letter === 0x46 ? 0 : Number.NaN;
    };
  }
  const bitpix = BITPIX_OF_TYPE[type];
  return bitpix === undefined ? null : READERS[bitpix].read;
}

/**
 * A column of a binary table (FITS 4.0, section 7.3), read lazily: scalars, vectors, and variable-length arrays whose
 * heap descriptors are checked against the heap before anything is read. TSCAL, TZERO and TNULL are applied.
 */
export class BinaryColumn implements Column {
  readonly name: string;
  readonly unit: string | null;
  readonly ucd: string | null;
  readonly utype: string | null;
  readonly description: string | null;
  readonly coordinateType: string | null;
  readonly isVector: boolean;
  readonly holds: Column['holds'];
  private readonly view: DataView;
  private readonly elementType: string;
  private readonly read: NumberReader | null;
  private heapBytesRead = 0;

  constructor(
    private readonly layout: BinaryLayout,
    private readonly format: BinaryFormat,
    /** First byte of the column in a row. */
    private readonly offset: number,
    private readonly cards: ColumnCards,
    private readonly place: Place,
  ) {
    ({
      name: this.name,
      unit: this.unit,
      ucd: this.ucd,
      utype: this.utype,
      description: this.description,
      coordinateType: this.coordinateType,
    } = cards);
    this.elementType = format.heapType ?? format.type;
    this.isVector = this.elementType !== 'A' && (format.heapType !== null || format.repeat > 1);
    this.holds = this.elementType === 'A' ? 'text' : this.elementType === 'L' ? 'logicals' : 'numbers';
    this.read = numberReader(this.elementType);
    this.view = new DataView(layout.data.buffer, layout.data.byteOffset, layout.data.byteLength);
  }

  scalars(): Float64Array {
    const values = new Float64Array(this.layout.rows).fill(Number.NaN);
    if (this.format.repeat === 0) return values;
    const { rowBytes, rows } = this.layout;
    for (let row = 0; row < rows; row++) values[row] = this.value(row * rowBytes + this.offset);
    return values;
  }

  cell(row: number): Float64Array {
    const { start, count } = this.extent(row);
    const values = new Float64Array(count);
    const step = elementBytes(this.elementType);
    for (let i = 0; i < count; i++) values[i] = this.value(start + i * step);
    return values;
  }

  /** The bytes of one cell, as they are stored. */
  bytes(row: number): Uint8Array {
    const { start, count } = this.extent(row);
    return this.layout.data.subarray(start, start + count * Math.max(1, elementBytes(this.elementType)));
  }

  text(row: number): string | null {
    if (this.elementType !== 'A') {
      const value = this.isVector ? Number.NaN : this.value(row * this.layout.rowBytes + this.offset);
      return Number.isFinite(value) ? String(value) : null;
    }
    const { start, count } = this.extent(row);
    const text = LATIN1.decode(this.layout.data.subarray(start, start + count));
    const end = text.indexOf('\0');
    return (end < 0 ? text : text.slice(0, end)).trim() || null;
  }

  private value(at: number): number {
    if (!this.read) return Number.NaN;
    const stored = this.read(this.view, at);
    if (this.cards.undefinedInteger !== null && stored === this.cards.undefinedInteger) return Number.NaN;
    return this.cards.zero + this.cards.scale * stored;
  }

  /** First byte and number of elements of a cell. */
  private extent(row: number): { start: number; count: number } {
    const at = row * this.layout.rowBytes + this.offset;
    if (this.format.heapType === null) return { start: at, count: this.format.repeat };
    if (this.format.repeat === 0) return { start: at, count: 0 };
    const wide = this.format.type === 'Q';
    const count = wide ? Number(this.view.getBigInt64(at)) : this.view.getInt32(at);
    const offset = wide ? Number(this.view.getBigInt64(at + 8)) : this.view.getInt32(at + 4);
    const heapBytes = this.layout.data.length - this.layout.heapStart;
    const fits = count >= 0 && offset >= 0 && offset + count * Math.max(1, elementBytes(this.elementType)) <= heapBytes;
    if (!fits) {
      throw problemAt(
        { ...this.place, row: row + 1, detail: `column ${this.name}` },
        'fits-heap-out-of-bounds',
        `A variable-length cell points to ${count} values at byte ${offset}, beyond the heap of ${heapBytes} bytes.`,
        'The table is damaged: write it again or copy it again.',
      );
    }
    // Cells may share bytes of the heap; a table whose cells all point to the same megabytes would unpack to terabytes.
    this.heapBytesRead += count;
    if (this.heapBytesRead > MAX_HEAP_READS * heapBytes) {
      throw problemAt(
        { ...this.place, detail: `column ${this.name}` },
        'fits-heap-overlap',
        'The variable-length cells overlap so much that the table would unpack to many times its size.',
        'Write the table again with a cell of its own for every row.',
      );
    }
    return { start: this.layout.heapStart + offset, count };
  }
}

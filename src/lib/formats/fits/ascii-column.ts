import type { Column } from '../columns/table';
import type { BinaryLayout, ColumnCards } from './binary-column';
import type { AsciiFormat } from './table-format';

const LATIN1 = new TextDecoder('latin1');

/** A column of an ASCII table (FITS 4.0, section 7.2): implied decimal points, blanks and TNULL as undefined. */
export class AsciiColumn implements Column {
  readonly name: string;
  readonly unit: string | null;
  readonly ucd: string | null;
  readonly utype: string | null;
  readonly description: string | null;
  readonly coordinateType: string | null;
  readonly isVector = false;
  readonly holds: Column['holds'];

  constructor(
    private readonly layout: BinaryLayout,
    private readonly format: AsciiFormat,
    /** First byte of the column in a row. */
    private readonly offset: number,
    private readonly cards: ColumnCards,
    private readonly undefinedText: string | null,
  ) {
    ({
      name: this.name,
      unit: this.unit,
      ucd: this.ucd,
      utype: this.utype,
      description: this.description,
      coordinateType: this.coordinateType,
    } = cards);
    this.holds = format.type === 'A' ? 'text' : 'numbers';
  }

  scalars(): Float64Array {
    return Float64Array.from({ length: this.layout.rows }, (_, row) => this.value(row));
  }

  cell(row: number): Float64Array {
    return Float64Array.of(this.value(row));
  }

  text(row: number): string | null {
    return this.field(row).trim() || null;
  }

  private field(row: number): string {
    const start = row * this.layout.rowBytes + this.offset;
    return LATIN1.decode(this.layout.data.subarray(start, start + this.format.width));
  }

  private value(row: number): number {
    if (this.format.type === 'A') return Number.NaN;
    const text = this.field(row).trim();
    if (text === '' || text === this.undefinedText) return Number.NaN;
    let stored = Number(text.replace(/[dD]/, 'e'));
    if (this.format.decimals > 0 && !text.includes('.') && this.format.type !== 'I') {
      stored /= 10 ** this.format.decimals;
    }
    return this.cards.zero + this.cards.scale * stored;
  }
}

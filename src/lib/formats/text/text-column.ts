import type { Column } from '../columns/table';

/** What a text file says of a column beside its cells. */
export interface TextColumnWords {
  name: string;
  unit: string | null;
  description: string | null;
  ucd: string | null;
}

const EMPTY = /^(nan|-nan|null|none|n\/a|na|--|\.\.\.|-|)$/i;
const TRUE = /^(true|t|yes)$/i;
const FALSE = /^(false|f|no)$/i;

/** The number in a cell: NaN where it is empty or says so, undefined where it is something else. */
export function cellNumber(text: string): number | undefined {
  const value = Number(text);
  if (value === value && text !== '') return value;
  const trimmed = text.trim();
  if (EMPTY.test(trimmed)) return Number.NaN;
  if (/^[+-]?inf(inity)?$/i.test(trimmed)) return trimmed.startsWith('-') ? -Infinity : Infinity;
  if (/^[+-]?[\d.]+[dD][+-]?\d+$/.test(trimmed)) return Number(trimmed.replace(/[dD]/, 'e'));
  if (/^[+-]?\d*,\d+(?:[eE][+-]?\d+)?$/.test(trimmed)) return Number(trimmed.replace(',', '.'));
  if (TRUE.test(trimmed)) return 1;
  return FALSE.test(trimmed) ? 0 : undefined;
}

/** A column of a text table, one value a row. */
export class TextColumn implements Column {
  readonly name: string;
  readonly unit: string | null;
  readonly ucd: string | null;
  readonly utype = null;
  readonly description: string | null;
  readonly coordinateType = null;
  readonly isVector = false;
  readonly holds: Column['holds'];

  constructor(
    words: TextColumnWords,
    private readonly values: Float64Array,
    /** Cells of a column that holds text. */
    private readonly texts: string[] | null,
  ) {
    ({ name: this.name, unit: this.unit, description: this.description, ucd: this.ucd } = words);
    this.holds = texts ? 'text' : 'numbers';
  }

  scalars(): Float64Array {
    return this.values;
  }

  cell(row: number): Float64Array {
    return this.values.subarray(row, row + 1);
  }

  text(row: number): string | null {
    const text = this.texts ? this.texts[row] : Number.isFinite(this.values[row]) ? String(this.values[row]) : '';
    return text?.trim() || null;
  }
}

import type { Cards } from '../cards';

/** One column of a table, whatever file it came from. Values are physical (scaled), NaN where undefined. */
export interface Column {
  name: string;
  unit: string | null;
  ucd: string | null;
  utype: string | null;
  /** Words about the column (TCOMM, ECSV description), which may name the medium. */
  description: string | null;
  /** Spectral type of the column's coordinate (TCTYP): `WAVE`, `AWAV` …, where the file says it. */
  coordinateType: string | null;
  /** True where a cell holds many values. */
  isVector: boolean;
  /** True where the column holds logical values, text or numbers. */
  holds: 'numbers' | 'logicals' | 'text';
  /** One number a row, for columns of one value a cell. */
  scalars(): Float64Array;
  /** The numbers of one cell; rows counted from 0 here. */
  cell(row: number): Float64Array;
  /** The text of one cell, trimmed; null where it is empty or the column holds none. */
  text(row: number): string | null;
}

/** A table that may hold spectra, one row a pixel or one row a spectrum. */
export interface Table {
  /** HDU counted from 0; 0 for text files. */
  extension: number;
  name: string;
  rows: number;
  columns: Column[];
  cards: Cards;
  /** Sentences around the table that may name medium and velocity frame (comments of a text file). */
  remarks: string[];
}

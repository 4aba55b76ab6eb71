/** One column of a table, or one image of a FITS file, as an assignment page shows it. */
export interface ShapeColumn {
  name: string;
  unit: string | null;
  description: string | null;
  holds: 'numbers' | 'logicals' | 'text';
  /** Values of one spectrum: rows of the table, or elements of a cell or image. */
  length: number;
  /** The first few values as text. */
  first: string[];
  /** What its name, UCD and the like point to, such as `flux`; null where they tell nothing. */
  guess: string | null;
}

/** A table, or the images of a file: what one assignment is for. */
export interface ShapePart {
  kind: 'table' | 'images';
  /** HDU of the table, counted from 0. */
  extension: number;
  /** Its name in words. */
  label: string;
  columns: ShapeColumn[];
}

/** The roles that a person may give a column, in the order in which they are asked for. */
export const ASSIGNED_ROLES = ['wavelength', 'flux', 'error', 'variance', 'inverseVariance', 'mask', 'sky'] as const;
export type AssignedRole = (typeof ASSIGNED_ROLES)[number];

/** Names of the columns of every part of a file: files with the same are of one shape. */
export function shapeNames(parts: readonly ShapePart[]): string {
  return JSON.stringify(parts.map(({ kind, columns }) => [kind, ...columns.map(({ name }) => name.toLowerCase())]));
}

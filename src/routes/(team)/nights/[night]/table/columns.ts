/** Columns of a night's table, in their order on the page. */
export const COLUMNS = [
  'name',
  'redshift',
  'confidence',
  'probability',
  'line',
  'signal',
  'flags',
  'verdict',
  'class',
  'exposure',
  'magnitude',
  'priority',
  'level',
  'noise',
  'middle',
  'sky',
  'ra',
  'dec',
  'file',
] as const;
export type Column = (typeof COLUMNS)[number];

export interface ColumnHead {
  label: string;
  unit?: string;
  right?: boolean;
  /** CSS pixels; `narrow` on a phone. */
  width: number;
  narrow?: number;
}

export const HEADS: Record<Column, ColumnHead> = {
  name: { label: 'target', width: 150, narrow: 106 },
  redshift: { label: 'redshift', unit: '± error', right: true, width: 152, narrow: 148 },
  confidence: { label: 'confidence', width: 112 },
  probability: { label: 'probability', unit: 'calibrated', right: true, width: 100 },
  line: { label: 'strongest line', width: 112 },
  signal: { label: 'S/N', unit: 'of that line', right: true, width: 84 },
  flags: { label: 'flags', width: 230 },
  verdict: { label: 'verdict', width: 210 },
  class: { label: 'object class', width: 130 },
  exposure: { label: 'exposure', unit: 's', right: true, width: 84 },
  magnitude: { label: 'magnitude', unit: 'as listed', right: true, width: 92 },
  priority: { label: 'priority', right: true, width: 76 },
  level: { label: 'S/N', unit: 'a pixel', right: true, width: 76 },
  noise: { label: 'noise factor', right: true, width: 100 },
  middle: { label: 'mid-exposure', unit: 'UTC', right: true, width: 104 },
  sky: { label: 'sky offset', unit: 'km/s', right: true, width: 92 },
  ra: { label: 'right ascension', unit: 'degrees', right: true, width: 118 },
  dec: { label: 'declination', unit: 'degrees', right: true, width: 104 },
  file: { label: 'file', width: 190 },
};

/** What is shown until someone chooses. */
export const FIRST_COLUMNS: readonly Column[] = COLUMNS.slice(0, COLUMNS.indexOf('class'));

/** A choice as it is kept, `name,redshift`: known columns in the page's order, the name always; the first choice for none. */
export function columnsOf(text: string | null): Column[] {
  const wanted = new Set(text?.split(','));
  const chosen = COLUMNS.filter((column) => column === 'name' || wanted.has(column));
  return text === null || chosen.length < 2 ? [...FIRST_COLUMNS] : chosen;
}

export const columnsText = (columns: readonly Column[]): string => columns.join(',');

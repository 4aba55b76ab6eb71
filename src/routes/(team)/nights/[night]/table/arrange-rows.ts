import { CONFIDENCE_WORDS, type Confidence } from '$lib/domain/confidence';
import type { NightMeasurement } from '$lib/domain/night';
import { COLUMNS, type Column } from './columns';

export interface Sort {
  column: Column;
  descending: boolean;
}

/** What is shown: everything, one confidence word, or what carries a flag. */
export const SHOWN = ['all', ...CONFIDENCE_WORDS, 'flagged'] as const;
export type Shown = (typeof SHOWN)[number];

/** The least certain come first: they are what an observer may still point at again. */
export const FIRST_SORT: Sort = { column: 'probability', descending: false };

/** A sort as it stands in the URL: the column, a minus before it for descending. Unknown text gives the first sort. */
export function sortOf(text: string | null): Sort {
  const descending = !!text?.startsWith('-');
  const column = COLUMNS.find((name) => name === text?.slice(descending ? 1 : 0));
  return column ? { column, descending } : FIRST_SORT;
}

export const sortText = ({ column, descending }: Sort): string => `${descending ? '-' : ''}${column}`;

export const shownOf = (text: string | null): Shown => SHOWN.find((name) => name === text) ?? 'all';

/** The name of a spectrum: its target's, else its file and, past the first row, its place in it. */
export function nameOf({ name, source, row }: NightMeasurement): string {
  return name ?? (row > 1 ? `${source}, row ${row}` : source);
}

const rank = (word: Confidence | null) => (word ? CONFIDENCE_WORDS.indexOf(word) : null);

const KEYS: Record<Column, (row: NightMeasurement) => string | number | null> = {
  name: nameOf,
  redshift: (row) => row.redshift,
  confidence: (row) => rank(row.confidence),
  probability: (row) => row.probability,
  line: (row) => row.strongestLine?.line ?? null,
  signal: (row) => row.strongestLine?.signalToNoise ?? null,
  flags: (row) => (row.flags.length ? row.flags.join(', ') : null),
  verdict: (row) => (row.verdict ? (row.verdict.redshift ?? -1) : null),
  class: (row) => row.objectClass,
  exposure: (row) => row.exposureSeconds,
  magnitude: (row) => row.magnitude,
  priority: (row) => row.priority,
  level: (row) => row.medianSignalToNoise,
  noise: (row) => row.noiseFactor,
  middle: (row) => row.midExposure,
  sky: (row) => row.skyOffsetKms,
  ra: (row) => row.ra,
  dec: (row) => row.dec,
  file: (row) => row.source,
};

const collator = new Intl.Collator('en', { numeric: true });

/** Rows in order. Those without the value come last, whichever way the rest runs; equals keep the order of submission. */
export function sortRows(rows: readonly NightMeasurement[], { column, descending }: Sort): NightMeasurement[] {
  const sign = descending ? -1 : 1;
  const keyed = rows.map((row) => ({ row, key: KEYS[column](row) }));
  keyed.sort((a, b) => {
    if (a.key === null || b.key === null) return a.key === b.key ? 0 : a.key === null ? 1 : -1;
    if (typeof a.key === 'string') return sign * collator.compare(a.key, b.key as string);
    return sign * (a.key - (b.key as number));
  });
  return keyed.map(({ row }) => row);
}

/** Rows that carry every word of the text in what their table row says, upper or lower case alike. */
export function filterRows(rows: readonly NightMeasurement[], text: string, shown: Shown): NightMeasurement[] {
  const words = text.toLowerCase().split(/\s+/).filter(Boolean);
  return rows.filter((row) => {
    if (shown === 'flagged' ? row.flags.length === 0 : shown !== 'all' && row.confidence !== shown) return false;
    if (words.length === 0) return true;
    const said = [nameOf(row), row.source, row.objectClass, row.strongestLine?.line, ...row.flags, row.verdict?.by]
      .join(' ')
      .toLowerCase();
    return words.every((word) => said.includes(word));
  });
}

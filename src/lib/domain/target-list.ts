import type { Problem } from './problem';

/** What a target list brought, as its person is told; names are examples, counts are whole. */
export interface TargetListReport {
  /** Rows taken, and rows refused with their reasons. */
  rows: number;
  problems: Problem[];
  /** Targets that were known from spectra or lists before. */
  known: number;
  /** Names of the list that no spectrum shows yet. */
  awaited: NamesSaid;
  /** Targets with spectra that stand on no list. */
  notListed: NamesSaid;
  /** Rows that are one target, by name or by place. */
  duplicates: { rows: number[]; names: string[] }[];
  /** Names that an earlier list had at another place; the newer place counts. */
  moved: NamesSaid;
  /** Spectra whose header names a listed target and puts it elsewhere. */
  doubts: number;
  /** Columns that are not kept. */
  ignored: string[];
}

export interface NamesSaid {
  count: number;
  names: string[];
}

/** Names said of a count; the page has the rest. */
export const NAMES_SAID = 20;

export const namesSaid = (names: readonly string[]): NamesSaid => ({
  count: names.length,
  names: names.slice(0, NAMES_SAID),
});

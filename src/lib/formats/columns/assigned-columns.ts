import type { Instrument } from '$lib/domain/instrument';
import type { Medium } from '$lib/domain/spectrum';

/** What is to be read by, for one table or the images of one file. */
export interface AssignedColumns {
  instrument: Instrument | undefined;
  /** What a person said of the medium of files with these columns; it goes before what the file says. */
  medium: Medium | null;
  /** A person said what is what: columns that they left out are nothing, whatever their names. */
  isAssigned: boolean;
}

const sameNames = (a: readonly string[], b: readonly string[]) =>
  a.length === b.length && a.every((name, i) => name.toLowerCase() === b[i].toLowerCase());

/**
 * The description as it holds for columns or images of these names: the newest assignment made for just these names
 * takes the place of `columns`; without one the description stands as it is.
 */
export function assignedColumns(names: readonly string[], instrument: Instrument | undefined): AssignedColumns {
  const found = instrument?.assignments?.findLast((assignment) => sameNames(assignment.names, names));
  if (!instrument || !found) return { instrument, medium: null, isAssigned: false };
  return { instrument: { ...instrument, columns: found.columns }, medium: found.medium ?? null, isAssigned: true };
}

import { velocityBetweenKms, verdictsAgree, type RedshiftVerdict } from './verdicts-agree';

/** A verdict that stands, with its time. */
export interface GivenVerdict extends RedshiftVerdict {
  /** Sorts by time. */
  id: string;
  /** The verdict that this row brought back by an undo; it then counts as given when that one was. */
  restores: string | null;
}

/** A ruling that stands, with its time. */
export interface GivenRuling extends RedshiftVerdict {
  /** Sorts by time, among verdicts too. */
  id: string;
}

/** What people have made of a spectrum: nothing yet, of one mind, of two, or ruled on by a third. */
export type Standing = 'unjudged' | 'agreed' | 'open' | 'ruled';

/**
 * Whether a spectrum is settled. A ruling holds until a verdict given after it disagrees with it; that opens the question again. Without
 * one, the question is open where any two verdicts disagree (`verdictsAgree`).
 *
 * @param verdicts one a person, those that stand
 * @param ruling the newest that stands, or null
 */
export function standingDecision(verdicts: readonly GivenVerdict[], ruling: GivenRuling | null): Standing {
  if (ruling) {
    const later = verdicts.filter(({ id, restores }) => (restores ?? id) > ruling.id);
    return later.every((verdict) => verdictsAgree(verdict, ruling)) ? 'ruled' : 'open';
  }
  if (verdicts.length === 0) return 'unjudged';
  return verdicts.every((a, i) => verdicts.slice(i + 1).every((b) => verdictsAgree(a, b))) ? 'agreed' : 'open';
}

/** The largest velocity between any two of the verdicts that have a redshift, km/s; null where fewer than two have one. */
export function widestVelocityKms(verdicts: readonly RedshiftVerdict[]): number | null {
  const redshifts = verdicts.flatMap(({ redshift }) => (redshift === null ? [] : [redshift]));
  if (redshifts.length < 2) return null;
  return velocityBetweenKms(Math.min(...redshifts), Math.max(...redshifts));
}

import { standingDecision, type Standing } from '$lib/science/review/standing-decision';
import { may, mayByRole, type Actor } from '../auth/permissions';
import type { LookRow } from '../database/queries/looks';
import type { ProgrammeRulingRow } from '../database/queries/rulings';

type Ruling = Pick<ProgrammeRulingRow, 'id' | 'userId' | 'redshift' | 'redshiftError'>;

/** What a person may know of what others said of a spectrum. */
export interface Sight {
  standing: Standing;
  /** They have a verdict of their own that stands. */
  judged: boolean;
  /** They may be shown others' verdicts. */
  sees: boolean;
  /** They are a third person to an open question, with the right to rule. */
  mayRule: boolean;
}

/**
 * Looks are blind: whoever may judge sees others' verdicts once they gave one of their own. A third person sees an open
 * question so as to rule on it, and keeps seeing what they ruled on; a curator who gives no verdicts sees all.
 * Asks nothing of the database, so that the queue can ask it for thousands.
 */
export function sightOf(actor: Actor, programmeId: string, verdicts: readonly LookRow[], ruling: Ruling | null): Sight {
  const standing = standingDecision(verdicts, ruling);
  const judged = verdicts.some(({ userId }) => userId === actor.userId);
  const rules = may(actor, 'spectrum.rule', programmeId);
  const mayRule = rules && !judged && standing === 'open';
  const looksOn = rules && !mayByRole(actor, 'spectrum.judge', programmeId);
  return { standing, judged, mayRule, sees: judged || mayRule || looksOn || ruling?.userId === actor.userId };
}

import type { Standing } from './standing-decision';
import { verdictsAgree, type RedshiftVerdict } from './verdicts-agree';

/**
 * What accepting a new measurement in bulk does with a spectrum: takes it, or leaves it alone since the measurement is the current one
 * (`current`), people differ and nobody has ruled (`open`), what people said is another redshift (`otherwise`), or people said something
 * that whoever accepts may not know yet (`unseen`).
 */
export type Acceptance = 'accept' | 'current' | 'open' | 'otherwise' | 'unseen';

/**
 * Whether a new measurement of a spectrum may be accepted in bulk. What a person said is never overridden: it stands beside whichever
 * measurement is current; but where it says something else than the new measurement, people are to look, not a filter to decide.
 *
 * @param after what the new measurement says; `isCurrent` that it is the current one already
 * @param standing how the spectrum stands by what people said of it
 * @param decided the redshift they agree on, or the ruling; null where they said nothing
 * @param sees whether whoever accepts may know what they said
 */
export function acceptanceOf(
  after: RedshiftVerdict & { isCurrent: boolean },
  standing: Standing,
  decided: RedshiftVerdict | null,
  sees: boolean,
): Acceptance {
  if (after.isCurrent) return 'current';
  if (standing === 'unjudged' || decided === null) return 'accept';
  if (!sees) return 'unseen';
  if (standing === 'open') return 'open';
  return verdictsAgree(decided, after) ? 'accept' : 'otherwise';
}

import type { FittedCandidate } from '../candidate-fit';
import { WIDEST_NARROW_KMS } from '../suspect';
import type { QuasarLikelihood } from './quasar-likelihood';

/** Offsets in ln(1+z) and velocity sigmas at which a fitted redshift is weighed again, km/s. */
const OFFSETS = [0, -0.003, 0.003];
const SIGMAS_KMS = [1000, 1800, 3200];
/**
 * Log likelihood that broad shapes may bring before they are taken with a grain of salt: blends, iron, absorption and
 * skew make two descriptions of one quasar differ by more than noise allows.
 */
const INFORMATION = 300;
/** Log evidence of the whole spectrum from which on a quasar is there. */
const UNMISTAKABLE = 100;

/**
 * Makes the evidences of the broad-line candidates compare: each joint fit sees the pixels around its own lines alone, so
 * that a redshift which leaves a strong line unexplained would not pay for it. The best of them keeps its evidence
 * against "no lines"; the others stand behind it by what the whole spectrum says, narrow lines and priors added. Narrow
 * lines at the limit of their width, which describe something broad, count for no more than a quasar at their redshift.
 *
 * @returns the log evidence that another description of the same broad shapes deserves, given its own against none of
 * them: where a quasar describes them better, both are taken on the same footing
 */
export function compareQuasars(
  candidates: readonly FittedCandidate[],
  weigh: QuasarLikelihood | null,
): (logEvidence: number) => number {
  const broad = candidates.filter((candidate) => candidate.kind === 'broad');
  if (!weigh || broad.length === 0) return (logEvidence) => logEvidence;
  const wholeAt = (logScale: number) =>
    Math.max(...OFFSETS.flatMap((offset) => SIGMAS_KMS.map((sigma) => weigh(logScale + offset, sigma).logEvidence)));
  const whole = broad.map(({ fit }) => wholeAt(fit.logScale));
  const most = Math.max(...whole);
  const temper = Math.sqrt(1 + Math.max(0, most) / INFORMATION);
  const best = broad[whole.indexOf(most)];
  const anchor = Math.min(best.broadEvidence, most / temper);
  broad.forEach((candidate, i) => {
    candidate.ownEvidence += anchor - candidate.broadEvidence - (most - whole[i]) / temper;
    candidate.wholeEvidence = whole[i];
    candidate.broadEvidence = anchor - (most - whole[i]) / temper;
    candidate.logEvidence = candidate.ownEvidence;
  });
  for (const candidate of most > UNMISTAKABLE ? candidates : []) {
    if (candidate.kind === 'broad' || candidate.fit.sigmaKms[0] < WIDEST_NARROW_KMS) continue;
    const asBroad = anchor - (most - wholeAt(candidate.fit.logScale)) / temper;
    candidate.ownEvidence = Math.min(candidate.ownEvidence, asBroad);
    candidate.logEvidence = candidate.ownEvidence;
  }
  return (logEvidence) =>
    logEvidence < most ? Math.min(logEvidence, anchor + (logEvidence - most) / temper) : logEvidence;
}

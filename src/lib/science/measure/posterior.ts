import type { FittedCandidate } from './candidate-fit';
import type { AbsorptionCandidate, Hypotheses } from './hypotheses';

/** Log prior odds against "nothing here" of the rivals that have no emission-line redshift. */
const LOG_PRIOR_STAR = Math.log(0.3);
const LOG_PRIOR_PASSIVE = Math.log(0.3);
/** Log evidence from which on the spectrum is starlike, and |ln(1+z)| within which emission is then the star's own. */
const STARLIKE = 8;
const REST_LOG_SCALE = 1500 / 299792.458;
/** A redshift peak of absorption lines is about 200 km/s wide in a flat prior over ln(1+z) up to 2.14. */
const LOG_ABSORPTION_PEAK = Math.log((2.5 * 200) / 299792.458 / 2.14);

/** Redshifts closer than this, 600 km/s in ln(1+z), are one. */
const SAME_LOG_SCALE = 0.002;

/** Normalised weights of every hypothesis, before calibration. */
export interface Posterior {
  emission: { candidate: FittedCandidate; probability: number }[];
  absorption: { candidate: AbsorptionCandidate; probability: number }[];
  star: number;
  nothing: number;
}

/** Turns log evidences and priors into probabilities that add up to 1. */
export function posteriorOf(hypotheses: Hypotheses): Posterior {
  const starlike = hypotheses.star.logEvidence > STARLIKE;
  const atRest = (candidate: FittedCandidate) => starlike && Math.abs(candidate.fit.logScale) < REST_LOG_SCALE;
  const candidates = hypotheses.candidates.filter((candidate) => !atRest(candidate));
  const active = Math.max(0, ...hypotheses.candidates.filter(atRest).map((candidate) => candidate.logEvidence));
  const emission = candidates.map((candidate) => candidate.logEvidence);
  // Absorption at the redshift of an emission candidate is the same answer, and counted there.
  const alone = hypotheses.absorption.filter((one) =>
    candidates.every((other) => Math.abs(other.fit.logScale - one.logScale) > SAME_LOG_SCALE),
  );
  const absorption = alone.map((candidate) => candidate.logEvidence + LOG_PRIOR_PASSIVE + LOG_ABSORPTION_PEAK);
  // A star's own emission, such as H-alpha of an active dwarf, speaks for the star.
  const star = hypotheses.star.logEvidence + active + LOG_PRIOR_STAR;
  const top = Math.max(0, star, ...emission, ...absorption);
  const weigh = (log: number) => Math.exp(log - top);
  let total = weigh(0) + weigh(star);
  for (const log of [...emission, ...absorption]) total += weigh(log);
  return {
    emission: candidates.map((candidate, i) => ({ candidate, probability: weigh(emission[i]) / total })),
    absorption: alone.map((candidate, i) => ({
      candidate,
      probability: weigh(absorption[i]) / total,
    })),
    star: weigh(star) / total,
    nothing: weigh(0) / total,
  };
}

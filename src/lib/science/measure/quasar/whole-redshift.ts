import type { QuasarFit, QuasarLikelihood } from './quasar-likelihood';

/** Steps of ln(1+z), 450 km/s each, to either side. */
const STEP = 0.0015;
const STEPS = 8;
/** Velocity sigmas tried, km/s. */
const SIGMAS_KMS = [900, 1300, 1800, 2600, 3800];

/** ln(1+z) near a given one at which the whole spectrum looks most like a quasar's: the vertex of the parabola over the best three. */
export function wholeRedshift(weigh: QuasarLikelihood, logScale: number): number {
  const at = (k: number): QuasarFit =>
    SIGMAS_KMS.map((sigma) => weigh(logScale + k * STEP, sigma)).reduce((a, b) =>
      b.logEvidence > a.logEvidence ? b : a,
    );
  const values = Array.from({ length: 2 * STEPS + 1 }, (_, i) => at(i - STEPS).logEvidence);
  const best = values.indexOf(Math.max(...values));
  if (best === 0 || best === values.length - 1) return logScale + (best - STEPS) * STEP;
  const [a, b, c] = values.slice(best - 1, best + 2);
  const curve = a - 2 * b + c;
  return logScale + (best - STEPS + (curve < 0 ? (0.5 * (a - c)) / curve : 0)) * STEP;
}

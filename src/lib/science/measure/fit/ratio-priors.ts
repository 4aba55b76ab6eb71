import { RATIO_PRIORS, type LineComponent, type RatioPrior } from './components';

/** Adds the priors on doublet ratios to the normal equations of the fluxes, in place. */
export function addRatioPriors(
  components: readonly LineComponent[],
  amplitude: Float64Array,
  gram: Float64Array,
  n: number,
): void {
  for (const prior of RATIO_PRIORS) {
    const j = components.findIndex((c) => c.width === 0 && c.name === prior.numerator);
    const i = components.findIndex((c) => c.width === 0 && c.name === prior.denominator);
    if (i < 0 || j < 0 || !(gram[i * n + i] > 0) || !(gram[j * n + j] > 0)) continue;
    addRatioPrior(prior, i, j, amplitude, gram, n);
  }
}

/** (a_j - r a_i) / (sigma a) is standard normal, with a the denominator's flux as the previous solution has it. */
function addRatioPrior(
  prior: RatioPrior,
  i: number,
  j: number,
  amplitude: Float64Array,
  gram: Float64Array,
  n: number,
): void {
  const floor = 0.5 / Math.sqrt(gram[i * n + i]);
  const level = Math.max(floor, (amplitude[i] + amplitude[j]) / (1 + prior.mean));
  const strength = 1 / (prior.sigma * level) ** 2;
  gram[j * n + j] += strength;
  gram[i * n + i] += prior.mean ** 2 * strength;
  gram[i * n + j] -= prior.mean * strength;
  gram[j * n + i] -= prior.mean * strength;
}

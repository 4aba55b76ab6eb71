import { RATIO_PRIORS, type LineComponent, type RatioPrior } from './components';

/** Adds the priors on doublet ratios to the normal equations of the fluxes, in place. */
export function addRatioPriors(
  components: readonly LineComponent[],
  amplitude: Float64Array,
  gram: Float64Array,
  n: number,
): void {
  for (const { prior, i, j } of pairsOf(components)) {
    if (gram[i * n + i] > 0 && gram[j * n + j] > 0) addRatioPrior(prior, i, j, amplitude, gram, n);
  }
}

interface PriorPair {
  prior: RatioPrior;
  /** Indices of the denominator and the numerator. */
  i: number;
  j: number;
}

/** Few lists of components are fitted over and over: where the pairs stand is looked up once a list. */
const pairs = new WeakMap<readonly LineComponent[], PriorPair[]>();

function pairsOf(components: readonly LineComponent[]): PriorPair[] {
  let found = pairs.get(components);
  if (!found) {
    const indexOf = (name: string) => components.findIndex((c) => c.width === 0 && c.name === name);
    found = RATIO_PRIORS.map((prior) => ({ prior, i: indexOf(prior.denominator), j: indexOf(prior.numerator) }));
    found = found.filter(({ i, j }) => i >= 0 && j >= 0);
    pairs.set(components, found);
  }
  return found;
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

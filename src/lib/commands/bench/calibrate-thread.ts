import { posteriorOf } from '$lib/science/measure/posterior';
import { prepareSpectrum } from '$lib/science/measure/prepare';
import { DEFAULT_SETTINGS } from '$lib/science/measure/settings';
import { weighHypotheses } from '$lib/science/measure/hypotheses';
import { isWithinThousand, knownAnswer } from './judge';
import { spectrumSeed, type BenchTask } from './plan-spectra';
import { simulateFor } from './run-task';

/** What the best candidate says before calibration. */
export interface RawAnswer {
  group: string;
  seed: number;
  logOdds: number;
  /** Significance of the strongest feature. */
  significance: number;
  resolvingPower: number;
  cameTrue: boolean;
}

/** Weighs the hypotheses of a run of spectra, without calibrating; called by the pool. Spectra without any candidate are left out. */
export function rawAnswers(task: BenchTask): RawAnswer[] {
  const answers: RawAnswer[] = [];
  if (task.kind !== 'group') return answers;
  for (let i = task.from; i < task.to; i++) {
    const seed = spectrumSeed(task.seed, i);
    const { spectrum, truth } = simulateFor(task.group, seed);
    const hypotheses = weighHypotheses(prepareSpectrum(spectrum), DEFAULT_SETTINGS);
    const { emission, absorption } = posteriorOf(hypotheses);
    const entries = [
      ...emission.map(({ candidate, probability }) => ({ logScale: candidate.fit.logScale, probability })),
      ...absorption.map(({ candidate, probability }) => ({ logScale: candidate.logScale, probability })),
    ];
    if (entries.length === 0) continue;
    const best = entries.reduce((a, b) => (b.probability > a.probability ? b : a));
    const bounded = Math.min(1 - 1e-12, Math.max(1e-12, best.probability));
    const middle = spectrum.wavelength.length >> 1;
    answers.push({
      group: task.group,
      seed,
      logOdds: Math.log(bounded / (1 - bounded)),
      significance: Math.max(1, ...hypotheses.features.map((feature) => feature.significance)),
      resolvingPower: spectrum.wavelength[middle] / (2.3548 * spectrum.lsfSigma[middle]),
      cameTrue: isWithinThousand(knownAnswer(truth), Math.expm1(best.logScale)),
    });
  }
  return answers;
}

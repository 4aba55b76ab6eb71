import { decide } from '$lib/science/measure/decide';
import type { CalibrationRow } from '$lib/science/measure/fit-calibration';
import { weighHypotheses } from '$lib/science/measure/hypotheses';
import { posteriorOf } from '$lib/science/measure/posterior';
import { prepareSpectrum } from '$lib/science/measure/prepare';
import { DEFAULT_SETTINGS } from '$lib/science/measure/settings';
import { isWithinThousand, knownAnswer } from './judge';
import { spectrumSeed, type BenchTask } from './plan-spectra';
import { simulateFor } from './run-task';

/** Answers of a run of spectra before calibration; called by the pool. Spectra without any candidate are left out. */
export function rawAnswers(task: BenchTask): CalibrationRow[] {
  const rows: CalibrationRow[] = [];
  if (task.kind !== 'group') return rows;
  for (let i = task.from; i < task.to; i++) {
    const { spectrum, truth } = simulateFor(task.group, spectrumSeed(task.seed, i));
    const prepared = prepareSpectrum(spectrum);
    const hypotheses = weighHypotheses(prepared, DEFAULT_SETTINGS);
    const decision = decide(prepared, hypotheses, posteriorOf(hypotheses), (raw) => raw, 1);
    const [first] = decision.candidates;
    if (!first) continue;
    const right = isWithinThousand(knownAnswer(truth), first.redshift);
    rows.push({ group: decision.group, raw: decision.rawProbability, signal: decision.signal, right });
  }
  return rows;
}

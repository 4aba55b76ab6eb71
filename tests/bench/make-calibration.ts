/**
 * Makes src/lib/science/measure/calibration-map.json from simulated spectra:
 * `npx tsx tests/bench/make-calibration.ts SPECTRA_A_CLASS FIRST_SEED`
 */
import { writeFileSync } from 'node:fs';
import { decide } from '$lib/science/measure/decide';
import { fitCalibrationMap, type CalibrationRow } from '$lib/science/measure/fit-calibration';
import { weighHypotheses } from '$lib/science/measure/hypotheses';
import { posteriorOf } from '$lib/science/measure/posterior';
import { prepareSpectrum } from '$lib/science/measure/prepare';
import { DEFAULT_SETTINGS } from '$lib/science/measure/settings';
import { drawRecipe } from '$lib/science/simulate/draw-recipe';
import { SPECTRUM_CLASSES } from '$lib/science/simulate/recipe';
import { simulateSpectrum } from '$lib/science/simulate/simulate-spectrum';

const count = Number(process.argv[2] ?? 200);
const firstSeed = Number(process.argv[3] ?? 20_000);
const version = process.argv[4] ?? '1';
const rows: CalibrationRow[] = [];
for (let seed = firstSeed; seed < firstSeed + count; seed++) {
  for (const spectrumClass of SPECTRUM_CLASSES) {
    const { spectrum, truth } = simulateSpectrum(drawRecipe(spectrumClass, seed), seed);
    const prepared = prepareSpectrum(spectrum);
    const hypotheses = weighHypotheses(prepared, DEFAULT_SETTINGS);
    const decision = decide(prepared, hypotheses, posteriorOf(hypotheses), (raw) => raw, 1);
    const [first] = decision.candidates;
    if (!first) continue;
    const answers = [truth.redshift, truth.redshiftSystemic, truth.secondRedshift];
    const right = answers.some(
      (answer) => answer !== null && Math.abs(first.redshift - answer) / (1 + answer) < 1000 / 299792.458,
    );
    rows.push({ group: decision.group, raw: decision.rawProbability, right });
  }
}
const target = new URL('../../src/lib/science/measure/calibration-map.json', import.meta.url);
const command = `npx tsx tests/bench/make-calibration.ts ${count} ${firstSeed} ${version}`;
writeFileSync(target, `${JSON.stringify({ version, command, ...fitCalibrationMap(rows) }, null, 2)}\n`);

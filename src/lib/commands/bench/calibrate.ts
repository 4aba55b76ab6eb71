import { writeFileSync } from 'node:fs';
import { availableParallelism } from 'node:os';
import { Piscina } from 'piscina';
import { ENGINE_VERSION } from '$lib/science/measure/settings';
import type { RawAnswer } from './calibrate-thread';
import { fitCalibration } from './fit-calibration';
import { planSpectra } from './plan-spectra';
import { layOutTable, short } from './print-table';

export interface CalibrateOptions {
  count: number;
  seed: number;
  threads: number | null;
  /** File for the map; null prints it. */
  map: string | null;
}

/**
 * Fits the calibration map on simulated spectra of every class: what share of the best candidates with given raw log odds lies within
 * 1,000 km/s of the truth. Prints how well maps with further terms (signal-to-noise, resolution) would do on the folds left out, and
 * writes the plain one, a straight line on log odds, in the form that the engine reads. Benches must use another seed than this fit.
 */
export async function runCalibrate({ count, seed, threads, map }: CalibrateOptions): Promise<void> {
  const size = threads ?? availableParallelism();
  const pool = new Piscina({
    filename: new URL('./bench/calibrate-thread.js', import.meta.url).href,
    minThreads: size,
    maxThreads: size,
  });
  const tasks = planSpectra(count, seed, 0);
  const parts = await Promise.all(
    tasks.map(async (task) => (await pool.run(task, { name: 'rawAnswers' })) as RawAnswer[]),
  );
  await pool.destroy();
  const answers = parts.flat();
  const forms: [string, (answer: RawAnswer) => number[]][] = [
    ['log odds', (a) => [a.logOdds]],
    ['log odds, signal', (a) => [a.logOdds, Math.log(a.significance)]],
    ['log odds, signal, resolution', (a) => [a.logOdds, Math.log(a.significance), Math.log(a.resolvingPower / 2000)]],
  ];
  const fits = forms.map(([name, terms]) => ({
    name,
    fit: fitCalibration(answers.map((a) => ({ terms: terms(a), cameTrue: a.cameTrue }))),
  }));
  process.stderr.write(
    `${layOutTable(
      ['terms', 'answers', 'log loss', 'ECE', 'offset and slopes'],
      fits.map(({ name, fit }) => [
        name,
        `${answers.length}`,
        short(fit.logLoss, 4),
        short(fit.calibrationError, 4),
        fit.coefficients.map((c) => short(c, 4)).join(' '),
      ]),
    )}\n`,
  );
  const [offset, slope] = fits[0].fit.coefficients;
  const json = {
    version: `${ENGINE_VERSION}-${seed}-${answers.length}`,
    slope: Number(slope.toPrecision(6)),
    offset: Number(offset.toPrecision(6)),
    note: `npm run bench -- calibrate --count ${count} --seed ${seed}`,
  };
  const text = `${JSON.stringify(json)}\n`;
  if (map) writeFileSync(map, text);
  else process.stdout.write(text);
}

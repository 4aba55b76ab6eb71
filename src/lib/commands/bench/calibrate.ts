import { writeFileSync } from 'node:fs';
import { availableParallelism } from 'node:os';
import { Piscina } from 'piscina';
import { fitCalibrationMap, type CalibrationRow } from '$lib/science/measure/fit-calibration';
import { planSpectra } from './plan-spectra';

export interface CalibrateOptions {
  count: number;
  seed: number;
  threads: number | null;
  /** File for the map; null prints it. */
  map: string | null;
}

/**
 * Fits the calibration map on simulated spectra of every class: what share of the first candidates with given raw log
 * odds and signal lies within 1,000 km/s of the truth, for every kind of object and evidence. Benches must use another
 * seed than this fit.
 */
export async function runCalibrate({ count, seed, threads, map }: CalibrateOptions): Promise<void> {
  const size = threads ?? availableParallelism();
  const pool = new Piscina({
    filename: new URL('./bench/calibrate-thread.js', import.meta.url).href,
    minThreads: size,
    maxThreads: size,
  });
  const parts = await Promise.all(
    planSpectra(count, seed, 0).map(async (task) => (await pool.run(task, { name: 'rawAnswers' })) as CalibrationRow[]),
  );
  await pool.destroy();
  const command = `npm run bench -- calibrate --count ${count} --seed ${seed}`;
  const text = `${JSON.stringify({ version: `${seed}-${count}`, command, ...fitCalibrationMap(parts.flat()) }, null, 2)}\n`;
  if (map) writeFileSync(map, text);
  else process.stdout.write(text);
}

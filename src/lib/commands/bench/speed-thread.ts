import { measureSpectrum } from '$lib/science/measure/measure-spectrum';
import { plainFit } from './plain-fit';
import { speedSpectra } from './speed-spectra';

export interface SpeedTask {
  count: number;
  warmUp: number;
  seed: number;
  /** Spectra for the plain fit; 0 leaves it out. */
  plain: number;
}

export interface SpeedResult {
  /** Milliseconds of each measurement. */
  milliseconds: number[];
  plainMilliseconds: number[];
  /** Most heap and array memory that this thread held, MB, the test spectra themselves left out. */
  memoryMegabytes: number;
}

function heldMegabytes(): number {
  const { heapUsed, external } = process.memoryUsage();
  return (heapUsed + external) / 1e6;
}

/** Measures one spectrum after the other, alone on its thread. */
export function timeSpectra({ count, warmUp, seed, plain }: SpeedTask): SpeedResult {
  const spectra = speedSpectra(count + warmUp, seed);
  const before = heldMegabytes();
  let most = before;
  const milliseconds: number[] = [];
  spectra.forEach((spectrum, i) => {
    const start = performance.now();
    measureSpectrum(spectrum);
    if (i >= warmUp) milliseconds.push(performance.now() - start);
    if (i % 5 === 0) most = Math.max(most, heldMegabytes());
  });
  const plainMilliseconds = spectra.slice(warmUp, warmUp + plain).map((spectrum) => {
    const start = performance.now();
    plainFit(spectrum);
    return performance.now() - start;
  });
  return { milliseconds, plainMilliseconds, memoryMegabytes: most - before };
}

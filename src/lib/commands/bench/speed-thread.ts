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
  /** Processor time of all measurements, ms: what the wall clock would show on an idle machine; only true alone in the process. */
  processorMilliseconds: number;
  plainProcessorMilliseconds: number;
  /** Most heap and array memory that this thread held, MB, the test spectra themselves left out. */
  memoryMegabytes: number;
}

function heldMegabytes(): number {
  const { heapUsed, external } = process.memoryUsage();
  return (heapUsed + external) / 1e6;
}

function processorSince(start: NodeJS.CpuUsage): number {
  const { user, system } = process.cpuUsage(start);
  return (user + system) / 1000;
}

/** Measures one spectrum after the other, alone on its thread. */
export function timeSpectra({ count, warmUp, seed, plain }: SpeedTask): SpeedResult {
  const spectra = speedSpectra(count + warmUp, seed);
  const before = heldMegabytes();
  let most = before;
  const milliseconds: number[] = [];
  let processorStart = process.cpuUsage();
  spectra.forEach((spectrum, i) => {
    if (i === warmUp) processorStart = process.cpuUsage();
    const start = performance.now();
    measureSpectrum(spectrum);
    if (i >= warmUp) milliseconds.push(performance.now() - start);
    if (i % 5 === 0) most = Math.max(most, heldMegabytes());
  });
  const processorMilliseconds = processorSince(processorStart);
  processorStart = process.cpuUsage();
  const plainMilliseconds = spectra.slice(warmUp, warmUp + plain).map((spectrum) => {
    const start = performance.now();
    plainFit(spectrum);
    return performance.now() - start;
  });
  return {
    milliseconds,
    plainMilliseconds,
    processorMilliseconds,
    plainProcessorMilliseconds: processorSince(processorStart),
    memoryMegabytes: most - before,
  };
}

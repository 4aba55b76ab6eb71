import { existsSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { Piscina } from 'piscina';
import { config } from '$lib/server/config/config';
import type { TakeFile } from '$lib/server/ingest/ingest-files';
import type { MeasureRows } from '$lib/server/measure/measure-spectra';
import type { RemeasureRows } from '$lib/server/measure/remeasure-spectra';

let piscina: Piscina | undefined;

/** Threads that parse and fit, so that the event loop never blocks. Bundled beside main; run by tsx in development. */
export function pool(): Piscina {
  if (!piscina) {
    const bundled = fileURLToPath(new URL('./threads/work.js', import.meta.url));
    const inDevelopment = !existsSync(bundled);
    piscina = new Piscina({
      filename: inDevelopment ? fileURLToPath(new URL('./threads/work.ts', import.meta.url)) : bundled,
      execArgv: inDevelopment ? ['--import', 'tsx'] : [],
      minThreads: config().WORKER_THREADS,
      maxThreads: config().WORKER_THREADS,
      resourceLimits: { maxOldGenerationSizeMb: 1024 },
    });
  }
  return piscina;
}

/** A task that takes longer than this is stuck: its thread is ended and another one started. */
const STUCK_MS = 120_000;
const options = (name: string) => ({ name, signal: AbortSignal.timeout(STUCK_MS) });

export const takeOnThread: TakeFile = (file, measureUpTo) => pool().run({ file, measureUpTo }, options('takeFile'));
export const measureOnThread: MeasureRows = (file, rows) => pool().run({ file, rows }, options('measureFile'));
export const remeasureOnThread: RemeasureRows = (file, rows) => pool().run({ file, rows }, options('remeasureFile'));

import { existsSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { Piscina } from 'piscina';
import { config } from '$lib/server/config/config';
import type { ReadFile } from '$lib/server/ingest/ingest-file';
import type { MeasureRows } from '$lib/server/measure/measure-spectra';

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

export const readOnThread: ReadFile = (file) => pool().run({ file }, { name: 'readFile' });
export const measureOnThread: MeasureRows = (file, rows) => pool().run({ file, rows }, { name: 'measureFile' });

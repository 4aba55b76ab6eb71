import { readFileSync } from 'node:fs';

/** Where the worker's time went, ms: sums over its jobs. */
export interface NightStages {
  jobs: number;
  /** On the engine's threads. */
  reading: number;
  engine: number;
  /** In the transactions that store results. */
  inserting: number;
}

/** Adds up what the worker's log says of the jobs that took files, from byte `from` of the log on. */
export function readStages(logPath: string, from: number): NightStages {
  return sumStages(readFileSync(logPath).subarray(from).toString('utf8'));
}

/** Lines that are not JSON (a stack of Node.js itself) are passed over. */
export function sumStages(log: string): NightStages {
  const sum: NightStages = { jobs: 0, reading: 0, engine: 0, inserting: 0 };
  for (const line of log.split('\n')) {
    if (!line.includes('"stages"')) continue;
    let stages: Partial<NightStages>;
    try {
      ({ stages } = JSON.parse(line) as { stages: Partial<NightStages> });
    } catch {
      continue;
    }
    sum.jobs++;
    sum.reading += stages.reading ?? 0;
    sum.engine += stages.engine ?? 0;
    sum.inserting += stages.inserting ?? 0;
  }
  return sum;
}

import { readFileSync } from 'node:fs';
import { availableParallelism } from 'node:os';
import { InputProblem } from '$lib/domain/input-problem';
import type { Instrument } from '$lib/domain/instrument';
import { problemLine, type MeasuredLine } from './measure/measured-line';
import { parseArguments, USAGE, type MeasureArguments } from './measure/parse-arguments';
import { readInput } from './measure/read-input';
import { ThreadPool } from './measure/thread-pool';

/** Larger files may hold many spectra, so their rows are shared among the threads: a share for each of these bytes. */
const BYTES_A_SHARE = 4 * 1024 * 1024;
const MAX_SHARES = 16;
/** Files read ahead of the fits, a thread. */
const READ_AHEAD = 4;

async function readInstrument(path: string | null): Promise<Instrument | undefined> {
  if (path === null) return undefined;
  // Loaded only where it is needed: the schema package is most of the start-up time.
  const { instrumentSchema } = await import('$lib/domain/instrument');
  const parsed = instrumentSchema.safeParse(JSON.parse(readFileSync(path, 'utf8')));
  if (parsed.success) return parsed.data;
  const [issue] = parsed.error.issues;
  throw new Error(`${issue.path.join('.') || 'the description'}: ${issue.message}`);
}

let nextId = 0;

async function measurePath(
  path: string,
  pool: ThreadPool,
  explain: boolean,
  instrument?: Instrument,
): Promise<MeasuredLine[]> {
  try {
    const bytes = await readInput(path);
    // The file alone decides, so that the output is the same for any number of threads.
    const parts = Math.min(MAX_SHARES, 1 + Math.floor(bytes.length / BYTES_A_SHARE));
    const tasks = Array.from({ length: parts }, (_, part) =>
      pool.run({ id: nextId++, source: path, bytes, instrument, explain, part, parts }),
    );
    return (await Promise.all(tasks)).flat().sort((a, b) => a.order - b.order);
  } catch (error) {
    if (error instanceof InputProblem) return [{ order: 0, ...problemLine(path, error.problem) }];
    throw error;
  }
}

/** Measures all files, prints in their order, and says whether every one was read. */
async function measureAll(args: MeasureArguments, instrument?: Instrument): Promise<boolean> {
  const threads = args.threads ?? availableParallelism();
  const pool = new ThreadPool(threads);
  const ahead = READ_AHEAD * threads;
  const running: Promise<MeasuredLine[]>[] = [];
  let started = 0;
  let allRead = true;
  for (let at = 0; at < args.files.length; at++) {
    while (started < args.files.length && started < at + ahead) {
      running[started] = measurePath(args.files[started], pool, args.explain, instrument);
      started++;
    }
    const lines = await running[at];
    delete running[at];
    for (const { json, notes, failed } of lines) {
      if (failed) allRead = false;
      for (const note of notes) process.stderr.write(`${note}\n`);
      if (!process.stdout.write(`${json}\n`)) await new Promise((resolve) => process.stdout.once('drain', resolve));
    }
  }
  await pool.close();
  return allRead;
}

async function main(): Promise<void> {
  const argv = process.argv.slice(2);
  if (argv.includes('--help')) {
    process.stderr.write(`${USAGE}\n`);
    return;
  }
  let args: MeasureArguments;
  let instrument: Instrument | undefined;
  try {
    args = parseArguments(argv);
  } catch (error) {
    process.stderr.write(`${(error as Error).message}\n\n${USAGE}\n`);
    process.exitCode = 1;
    return;
  }
  try {
    instrument = await readInstrument(args.instrumentFile);
  } catch (error) {
    process.stderr.write(`${args.instrumentFile}: this is no instrument description (${(error as Error).message}).\n`);
    process.exitCode = 1;
    return;
  }
  process.exitCode = (await measureAll(args, instrument)) ? 0 : 1;
}

// A reader that has seen enough (`| head`) closes the pipe; that is no failure of ours.
process.stdout.on('error', (error: NodeJS.ErrnoException) => process.exit(error.code === 'EPIPE' ? 0 : 1));
await main();

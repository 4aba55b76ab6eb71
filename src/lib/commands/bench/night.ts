import { execFile } from 'node:child_process';
import { mkdtempSync, rmSync, statSync } from 'node:fs';
import { availableParallelism, cpus, loadavg, tmpdir } from 'node:os';
import { join } from 'node:path';
import { promisify } from 'node:util';
import { Piscina } from 'piscina';
import { readStages, type NightStages } from './night-stages';
import type { AloneResult, AloneTask, MakeTask } from './night-thread';
import { layOutTable, short } from './print-table';
import { processorTimes, type ProcessorTimes } from './processor-times';
import { startInstallation, type BenchInstallation } from './review-installation';
import { sendFiles } from './send-files';

const run = promisify(execFile);
const pause = (ms: number) => new Promise((resolve) => setTimeout(resolve, ms));

export interface NightOptions {
  count: number;
  seed: number;
}

/** Seconds that 5,000 spectra may take, and how often the engine's own time. */
const GOAL_SECONDS = 60;
const GOAL_COUNT = 5_000;
const GOAL_RATIO = 1.8;
/** Spectra that a thread measures for the engine's own figure, after its warm-up. */
const ALONE_SPECTRA = 300;
const WARM_UP = 60;
const MADE_TOGETHER = 50;
/** The night page hears of changes a few times a second at most; every look at the whole night costs the database. */
const FOLLOW_EVERY_MS = 1_000;
const MEASURED_WITHIN_MS = 30 * 60_000;

interface Mark {
  clock: number;
  processes: ProcessorTimes;
}

interface Run {
  /** Seconds from the first byte sent to the last answer, and to the last measurement stored. */
  sent: number;
  whole: number;
  /** Processor seconds by process. */
  processes: ProcessorTimes;
  stages: NightStages;
}

interface Alone {
  seconds: number;
  processorSeconds: number;
}

function threadsOf(threads: number): Piscina {
  const filename = new URL('./bench/night-thread.js', import.meta.url).href;
  return new Piscina({ filename, minThreads: threads, maxThreads: threads });
}

async function makeAll(folder: string, count: number, seed: number, threads: number): Promise<string[]> {
  const pool = threadsOf(threads);
  const tasks: Promise<string[]>[] = [];
  for (let from = 0; from < count; from += MADE_TOGETHER) {
    const task: MakeTask = { folder, from, to: Math.min(count, from + MADE_TOGETHER), seed };
    tasks.push(pool.run(task, { name: 'makeFiles' }) as Promise<string[]>);
  }
  const paths = (await Promise.all(tasks)).flat();
  await pool.destroy();
  return paths;
}

interface NightState {
  done: boolean;
  files: { total: number };
  spectra: { total: number; waiting: number };
}

/** Sends the files to a night of their own and follows it until the last measurement is stored. */
async function sendNight(installation: BenchInstallation, paths: readonly string[]): Promise<Run> {
  const { origin, data, pid } = installation;
  const { email } = installation.account('Rua');
  const command = ['docker-free-scripts/run-command.mjs', 'token', '--email', email, '--scope', 'read submit'];
  const token = (
    await run(process.execPath, command, { env: { ...process.env, DATA: data, DATABASE_URL: undefined } })
  ).stdout.trim();
  const ask = async (path: string, init: RequestInit = {}) => {
    const headers = { authorization: `Bearer ${token}`, 'content-type': 'application/json' };
    const answer = await fetch(`${origin}${path}`, { ...init, headers });
    if (!answer.ok) throw new Error(`${path}: ${await answer.text()}`);
    return answer.json();
  };
  const { nights } = (await ask('/api/v1/nights')) as { nights: { id: string }[] };
  // The demo's own nights are measured first.
  for (const { id } of nights) {
    while (!((await ask(`/api/v1/nights/${id}`)) as NightState).done) await pause(FOLLOW_EVERY_MS);
  }
  const made = await ask('/api/v1/nights', { method: 'POST', body: JSON.stringify({ civilDate: '2026-09-21' }) });
  const night = `/api/v1/nights/${(made as { id: string }).id}`;

  const log = join(data, 'logs/worker.log');
  const logged = statSync(log).size;
  const mark = (): Mark => {
    const { user, system } = process.cpuUsage();
    const processes = { 'sender and follower': (user + system) / 1000, ...processorTimes(pid) };
    return { clock: performance.now(), processes };
  };
  const began = mark();
  let sent = 0;
  const sending = sendFiles(`${origin}${night}/files`, token, paths).then(() => (sent = performance.now()));
  // A refusal is told at once, not after the night was waited for in vain.
  let refusal: Error | undefined;
  sending.catch((error: Error) => (refusal = error));
  for (;;) {
    await pause(FOLLOW_EVERY_MS);
    if (refusal) throw refusal;
    const state = (await ask(night)) as NightState;
    if (sent > 0 && state.done && state.files.total === paths.length) break;
    if (performance.now() - began.clock > MEASURED_WITHIN_MS) throw new Error('the night was not measured in time');
  }
  const ended = mark();
  const processes = Object.fromEntries(
    Object.entries(ended.processes).map(([name, time]) => [name, (time - (began.processes[name] ?? 0)) / 1000]),
  );
  return {
    sent: (sent - began.clock) / 1000,
    whole: (ended.clock - began.clock) / 1000,
    processes,
    stages: readStages(log, logged),
  };
}

/** What the engine alone needs for as many spectra on every core, from a part of them. */
async function timeEngine(paths: readonly string[], threads: number): Promise<Alone> {
  const pool = threadsOf(threads);
  const ready = new SharedArrayBuffer(4);
  const each = Math.min(ALONE_SPECTRA, Math.floor(paths.length / threads));
  const every = Math.floor(paths.length / (threads * each));
  const results = (await Promise.all(
    Array.from({ length: threads }, (_, t) => {
      const own = Array.from({ length: each }, (_, k) => paths[(k * threads + t) * every]);
      const task: AloneTask = { paths: own, warmUp: WARM_UP, threads, ready };
      return pool.run(task, { name: 'engineAlone' });
    }),
  )) as AloneResult[];
  await pool.destroy();
  const span = (of: 'clock' | 'processor') =>
    Math.max(...results.map(({ ended }) => ended[of])) - Math.min(...results.map(({ began }) => began[of]));
  const scale = paths.length / (threads * each) / 1000;
  return { seconds: scale * span('clock'), processorSeconds: scale * span('processor') };
}

/**
 * A night as it comes: files sent over HTTP to a production build with MariaDB and Redis on the same machine, followed
 * until the last measurement is stored; then the engine alone on the same spectra. Prints the split by stage.
 */
export async function runNight({ count, seed }: NightOptions): Promise<void> {
  const threads = availableParallelism();
  const folder = mkdtempSync(join(tmpdir(), 'farglow-night-'));
  try {
    const start = performance.now();
    const paths = await makeAll(folder, count, seed, threads);
    process.stderr.write(`Made ${count} files in ${short((performance.now() - start) / 1000, 0)} s (not counted).\n`);
    const installation = await startInstallation({ LOG_LEVEL: 'debug' });
    let night: Run;
    try {
      night = await sendNight(installation, paths);
    } finally {
      await installation.stop();
    }
    const load = loadavg()[0];
    print(night, await timeEngine(paths, threads), count, threads, load);
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

function print(night: Run, alone: Alone, count: number, threads: number, load: number): void {
  const { stages, whole } = night;
  const share = (seconds: number, of: number) => `${short((100 * seconds) / of, 0)} %`;
  const onThreads = (ms: number) => ms / 1000 / threads;
  const idle = whole - onThreads(stages.reading + stages.engine);
  const wall = (name: string, seconds: number) => [name, short(seconds, 1), share(seconds, whole)];
  const total = Object.values(night.processes).reduce((sum, time) => sum + time, 0);
  const goal = (GOAL_SECONDS * count) / GOAL_COUNT;
  const verdict = (value: number, limit: number) => (value <= limit ? 'yes' : 'no');
  const ratios = [
    ['first byte sent to last measurement, s', whole, goal],
    ['times the engine alone, by the clock', whole / alone.seconds, GOAL_RATIO],
    ['times the engine alone, by processor time', total / alone.processorSeconds, GOAL_RATIO],
  ] as const;
  process.stdout.write(
    `\nNight of ${count} spectra; ${cpus()[0]?.model}, ${threads} cores, load ${load.toFixed(1)}\n\n` +
      `${layOutTable(
        ['stage', 's', 'of the whole'],
        [
          wall('sending and storing files, overlapping the rest', night.sent),
          wall('reading, on each thread', onThreads(stages.reading)),
          wall('engine, on each thread', onThreads(stages.engine)),
          wall('threads waiting', idle),
          wall(`inserting results, ${stages.jobs} transactions, some at once`, stages.inserting / 1000),
        ],
      )}\n\n` +
      `${layOutTable(
        ['process', 'processor s', 'of all'],
        [
          ...Object.entries(night.processes).map(([name, time]) => [name, short(time, 1), share(time, total)]),
          ['all', short(total, 1), ''],
          ['engine alone', short(alone.processorSeconds, 1), ''],
        ],
      )}\n\n` +
      `${layOutTable(
        ['', 'measured', 'goal', 'reached'],
        ratios.map(([name, value, limit]) => [name, short(value, 2), short(limit, 1), verdict(value, limit)]),
      )}\n`,
  );
}

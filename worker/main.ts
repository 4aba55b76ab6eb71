import { availableParallelism } from 'node:os';
import { Worker } from 'bullmq';
import { config } from '$lib/server/config/config';
import { closeDatabase } from '$lib/server/database/connection';
import { pendingMigrations } from '$lib/server/database/migrate';
import { cleanStaging } from '$lib/server/ingest/clean-staging';
import { postReports } from '$lib/server/ingest/post-reports';
import { log } from '$lib/server/log/log';
import { JOBS, type JobName } from '$lib/server/queue/jobs';
import { closeNudges } from '$lib/server/queue/nudge';
import { closeRedis, redis, redisOptions, channel } from '$lib/server/queue/redis';
import { queueName, startRelay } from '$lib/server/queue/relay';
import { postDigests } from '$lib/server/review/post-digests';
import { plantSpectra } from '$lib/server/review/plant-spectra';
import { objects } from '$lib/server/storage/storage';
import { handlers } from './jobs/handlers';
import { pool } from './thread-pool';

/** A stalled job is taken over three lost renewals after its lock: lock 15 s, looked for every 5 s. */
const LOCK_MS = 15_000;
const STALLED_EVERY_MS = 5_000;
/** What no event starts is looked for this often: reports of nights that ended, planted spectra that are wanted, mentions. */
const ROUNDS_EVERY_MS = 60_000;
const ROUNDS: [name: string, round: () => Promise<number>][] = [
  ['reports', () => postReports(new Date())],
  ['planted', plantSpectra],
  ['digests', () => postDigests(new Date())],
];
/** What was begun and left is looked for this often. */
const CLEAN_EVERY_MS = 3_600_000;
/** Shutdown waits this long for fits in hand; what is not stored by then is offered again. */
const SHUTDOWN_MS = 10_000;

async function bootCheck(): Promise<void> {
  const pending = await pendingMigrations();
  if (pending.length) throw new Error(`The database lacks ${pending.join(', ')}: run "npm run migrate" first.`);
  await objects().check();
  const unhandled = Object.keys(JOBS).filter((name) => !(name in handlers));
  const unknown = Object.keys(handlers).filter((name) => !(name in JOBS));
  if (unhandled.length || unknown.length)
    throw new Error(`Jobs and handlers differ: ${[...unhandled, ...unknown].join(', ')}`);
}

async function main(): Promise<void> {
  await bootCheck();
  const relay = startRelay();
  const worker = new Worker(
    queueName,
    async (job) => {
      const name = job.name as JobName;
      const handle = handlers[name] as (payload: unknown, jobId: string) => Promise<void>;
      // A failed try is not BullMQ's to repeat: its wish stays in MariaDB and is offered again.
      await handle(JOBS[name].parse(job.data), job.id!);
    },
    {
      connection: redisOptions(null),
      prefix: config().QUEUE_PREFIX,
      concurrency: 2 * config().WORKER_THREADS,
      lockDuration: LOCK_MS,
      stalledInterval: STALLED_EVERY_MS,
      maxStalledCount: 1_000,
    },
  );
  worker.on('failed', (job, error) =>
    log.warn({ job: job?.id, err: error.message }, 'job failed; it is offered again'),
  );
  worker.on('error', (error) => log.debug({ err: error.message }, 'worker'));

  const tellAlive = () => {
    const life = JSON.stringify({ at: Date.now(), threads: config().WORKER_THREADS, cores: availableParallelism() });
    redis()
      .set(`${channel('worker')}-${process.pid}`, life, 'EX', 15)
      .catch(() => {});
  };
  tellAlive();
  const beat = setInterval(tellAlive, 5_000);
  const goRound = async () => {
    for (const [name, round] of ROUNDS) {
      await round().catch((error: Error) => log.warn({ round: name, err: error.message }, 'a round failed'));
    }
  };
  const rounds = setInterval(() => void goRound(), ROUNDS_EVERY_MS);
  const clean = () =>
    void cleanStaging(new Date()).catch((error: Error) => log.warn({ err: error.message }, 'staging not cleaned'));
  clean();
  const cleaning = setInterval(clean, CLEAN_EVERY_MS);
  log.info({ threads: config().WORKER_THREADS, pid: process.pid }, 'worker is up');

  let ending = false;
  const end = async (signal: string) => {
    if (ending) return;
    ending = true;
    log.info({ signal }, 'worker is ending');
    const late = setTimeout(() => process.exit(1), SHUTDOWN_MS);
    clearInterval(beat);
    clearInterval(rounds);
    clearInterval(cleaning);
    await relay.stop();
    await worker.close();
    await pool().destroy();
    closeNudges();
    await closeRedis();
    await closeDatabase();
    clearTimeout(late);
    process.exit(0);
  };
  process.on('SIGTERM', () => void end('SIGTERM'));
  process.on('SIGINT', () => void end('SIGINT'));
}

main().catch((error) => {
  log.fatal({ err: error }, 'worker could not start');
  process.exit(1);
});

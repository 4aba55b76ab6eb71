import { Queue } from 'bullmq';
import { config } from '../config/config';
import { takeOutbox } from '../database/queries/outbox';
import { log } from '../log/log';
import { onNudge } from './nudge';
import { redisOptions } from './redis';

const BATCH = 500;
/** A wish not done by then is offered again: its job id makes a second offer harmless while the first still waits. */
const OFFER_AGAIN_SECONDS = 15;
const LOOK_EVERY_MS = 1_000;

export const queueName = 'work';

/**
 * Hands wishes from MariaDB to Redis, here and in every other worker, until stopped. Redis holds nothing that MariaDB
 * has not: when it comes back empty, what is not done is offered again.
 */
export function startRelay(): { stop: () => Promise<void> } {
  const queue = new Queue(queueName, { connection: redisOptions(1), prefix: config().QUEUE_PREFIX });
  queue.on('error', (error) => log.debug({ err: error.message }, 'queue'));
  let stopped = false;
  let wake: () => void = () => {};
  let nudged = false;
  const endNudges = onNudge('outbox', () => {
    nudged = true;
    wake();
  });

  async function handOver(): Promise<number> {
    const rows = await takeOutbox(BATCH, OFFER_AGAIN_SECONDS);
    if (rows.length) {
      // Finished and failed jobs leave at once: BullMQ would swallow a re-used id while it kept the old job.
      const options = { removeOnComplete: true, removeOnFail: true };
      await queue.addBulk(
        rows.map(({ jobName, jobId, payload }) => ({ name: jobName, data: payload, opts: { ...options, jobId } })),
      );
    }
    return rows.length;
  }

  const running = (async () => {
    while (!stopped) {
      nudged = false;
      const handed = await handOver().catch((error: Error) => {
        log.warn({ err: error.message }, 'relay could not hand over; it tries again');
        return 0;
      });
      if (handed === BATCH || nudged || stopped) continue;
      await new Promise<void>((resolve) => {
        wake = resolve;
        setTimeout(resolve, LOOK_EVERY_MS);
      });
    }
  })();

  return {
    async stop() {
      stopped = true;
      endNudges();
      wake();
      await running;
      await queue.close();
    },
  };
}

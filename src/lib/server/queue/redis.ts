import { Redis } from 'ioredis';
import { config } from '../config/config';
import { log } from '../log/log';

const kept = globalThis as { farglowRedis?: Redis };

/** The process's connection for short commands; fails within half a second when Redis is away. */
export function redis(): Redis {
  if (!kept.farglowRedis) {
    kept.farglowRedis = new Redis(config().REDIS_URL, { maxRetriesPerRequest: 1, connectTimeout: 2_000 });
    kept.farglowRedis.on('error', (error) => log.warn({ err: error.message }, 'Redis is not answering'));
  }
  return kept.farglowRedis;
}

/** Connection options for BullMQ, which keeps connections of its own. */
export function redisOptions(retries: number | null): { url: string; maxRetriesPerRequest: number | null } {
  return { url: config().REDIS_URL, maxRetriesPerRequest: retries };
}

export const channel = (name: string): string => `${config().QUEUE_PREFIX}-${name}`;

export async function closeRedis(): Promise<void> {
  kept.farglowRedis?.disconnect();
  kept.farglowRedis = undefined;
}

import { pendingMigrations } from '../database/migrate';
import { outboxDepth } from '../database/queries/outbox';
import { channel, redis } from '../queue/redis';
import { objects } from '../storage/storage';

export interface Health {
  ok: boolean;
  services: Record<'database' | 'redis' | 'storage' | 'workers', { ok: boolean; detail: string }>;
  outbox: { waiting: number; oldestSeconds: number | null } | null;
}

const PATIENCE_MS = 3_000;

async function probe(check: () => Promise<string>): Promise<{ ok: boolean; detail: string }> {
  try {
    let timer: NodeJS.Timeout | undefined;
    const late = new Promise<never>((_, reject) => {
      timer = setTimeout(() => reject(new Error('no answer in 3 s')), PATIENCE_MS);
    });
    const detail = await Promise.race([check(), late]).finally(() => clearTimeout(timer));
    return { ok: true, detail };
  } catch {
    return { ok: false, detail: 'not answering' };
  }
}

/** Public use-case: whether each service answers, and how much work waits. Tells nothing of what the work is about. */
export async function readHealth(): Promise<Health> {
  let outbox: Health['outbox'] = null;
  const [database, redisAnswer, storage, workers] = await Promise.all([
    probe(async () => {
      const pending = await pendingMigrations();
      if (pending.length) throw new Error('older schema');
      outbox = await outboxDepth();
      return 'answers, schema current';
    }),
    probe(async () => `answers ${await redis().ping()}`),
    probe(async () => {
      await objects().check();
      return 'writable';
    }),
    probe(async () => {
      const found = await redis().keys(`${channel('worker')}-*`);
      if (found.length === 0) throw new Error('none');
      return `${found.length} alive`;
    }),
  ]);
  const services = { database, redis: redisAnswer, storage, workers };
  return { ok: Object.values(services).every((service) => service.ok), services, outbox };
}

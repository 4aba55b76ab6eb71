import { Redis } from 'ioredis';
import { config } from '../config/config';
import { log } from '../log/log';
import { channel, redis } from './redis';

/** Tells listeners that something changed. They read what from MariaDB; a lost nudge only delays them. */
export function nudge(topic: 'outbox' | 'nights', detail = ''): void {
  redis()
    .publish(channel(topic), detail)
    .catch((error: Error) => log.debug({ err: error.message }, 'nudge lost'));
}

const kept = globalThis as { farglowListener?: Redis; farglowTopics?: Map<string, Set<(detail: string) => void>> };

/** Calls `heard` on every nudge of a topic; returns the function that ends it. One Redis connection a process. */
export function onNudge(topic: 'outbox' | 'nights', heard: (detail: string) => void): () => void {
  kept.farglowTopics ??= new Map();
  const topics = kept.farglowTopics;
  if (!kept.farglowListener) {
    kept.farglowListener = new Redis(config().REDIS_URL, { maxRetriesPerRequest: null });
    kept.farglowListener.on('error', (error) => log.debug({ err: error.message }, 'nudges are not heard'));
    kept.farglowListener.on('message', (name: string, detail: string) =>
      topics.get(name)?.forEach((call) => call(detail)),
    );
  }
  const name = channel(topic);
  if (!topics.has(name)) {
    topics.set(name, new Set());
    kept.farglowListener.subscribe(name).catch((error: Error) => log.debug({ err: error.message }, 'not subscribed'));
  }
  topics.get(name)!.add(heard);
  return () => topics.get(name)?.delete(heard);
}

export function closeNudges(): void {
  kept.farglowListener?.disconnect();
  kept.farglowListener = undefined;
  kept.farglowTopics = undefined;
}

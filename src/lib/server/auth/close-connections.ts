import { closeDatabase } from '../database/connection';
import { closeNudges } from '../queue/nudge';
import { closeRedis } from '../queue/redis';

/** Closes what the web process holds open; with any of it open the process would never end. */
export async function closeConnections(): Promise<void> {
  closeNudges();
  await Promise.all([closeRedis(), closeDatabase()]);
}

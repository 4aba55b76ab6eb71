import { RateLimiterRedis } from 'rate-limiter-flexible';
import { Refusal } from '$lib/domain/refusal';
import { log } from '../log/log';
import { channel, redis } from '../queue/redis';

/** Wrong tries a quarter of an hour: by account and network together, so that nobody can lock another out, and by network. */
const WINDOW_SECONDS = 15 * 60;
const PER_ACCOUNT_AND_NETWORK = 10;
const PER_NETWORK = 100;

let limits: { pair: RateLimiterRedis; network: RateLimiterRedis } | undefined;

function limiters() {
  const shared = { storeClient: redis(), duration: WINDOW_SECONDS };
  limits ??= {
    pair: new RateLimiterRedis({ ...shared, keyPrefix: channel('sign-in-pair'), points: PER_ACCOUNT_AND_NETWORK }),
    network: new RateLimiterRedis({ ...shared, keyPrefix: channel('sign-in-network'), points: PER_NETWORK }),
  };
  return limits;
}

/** Counts a try to sign in; refuses once there were too many. With Redis away it lets people in and says so in the log. */
export async function countSignIn(email: string, network: string): Promise<void> {
  const { pair, network: wide } = limiters();
  try {
    await Promise.all([pair.consume(`${network} ${email.toLowerCase()}`), wide.consume(network)]);
  } catch (reason) {
    if (reason instanceof Error) {
      log.warn({ err: reason.message }, 'sign-ins are not counted: Redis is away');
      return;
    }
    const minutes = Math.ceil((reason as { msBeforeNext: number }).msBeforeNext / 60_000);
    throw new Refusal('too-many', 'Too many tries to sign in from here.', `Wait ${minutes} minutes, then try again.`);
  }
}

/** Forgets the wrong tries of an account from a network, after a right one. */
export async function forgiveSignIn(email: string, network: string): Promise<void> {
  await limiters()
    .pair.delete(`${network} ${email.toLowerCase()}`)
    .catch(() => {});
}

import { spawn, type ChildProcess } from 'node:child_process';

/** A worker of its own process, from the bundle that the run's set-up built. */
export function startWorker(env: Record<string, string>): ChildProcess & { gone: Promise<void> } {
  const child = spawn(process.execPath, ['build/worker/main.js'], {
    env: { ...process.env, ...env, NODE_ENV: 'production' },
    stdio: ['ignore', 'inherit', 'inherit'],
  });
  const gone = new Promise<void>((resolve) => child.once('exit', () => resolve()));
  return Object.assign(child, { gone });
}

/** Waits until `check` gives something, looking ten times a second; says `what` when it does not come. */
export async function until<T>(
  what: string,
  check: () => Promise<T | null | undefined | false>,
  withinMs = 60_000,
): Promise<T> {
  for (let waited = 0; waited < withinMs; waited += 100) {
    const found = await check();
    if (found) return found;
    await new Promise((resolve) => setTimeout(resolve, 100));
  }
  throw new Error(`${what} did not come within ${withinMs / 1000} s`);
}

import { spawn } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
// @ts-expect-error plain JavaScript, so that it runs before anything is installed
import { freePort } from '../../docker-free-scripts/services.mjs';

/** Where the run's address, data folder and accounts stand, for the tests to read. */
export const STATE = join(tmpdir(), 'farglow-e2e-state.json');

export interface State {
  origin: string;
  data: string;
  accounts: { name: string; email: string; password: string; roles: string }[];
}

export const readState = (): State => JSON.parse(readFileSync(STATE, 'utf8')) as State;

const START_WITHIN_MS = 5 * 60_000;
/** Small, so that a file over the limit is quickly made. */
const MAX_FILE_BYTES = 2 * 1024 * 1024;

/** A whole installation by the README's own command, in a folder and on a port of its own; stopped when the run ends. */
export default async function setup(): Promise<() => Promise<void>> {
  const data = mkdtempSync(join(tmpdir(), 'farglow-e2e-'));
  const port = (await freePort()) as number;
  const child = spawn('docker-free-scripts/start', ['--data', data], {
    env: { ...process.env, PORT: String(port), MAX_FILE_BYTES: String(MAX_FILE_BYTES) },
    stdio: ['ignore', 'pipe', 'inherit'],
  });
  const gone = new Promise<void>((resolve) => child.once('exit', () => resolve()));
  await new Promise<void>((resolve, reject) => {
    let text = '';
    const late = setTimeout(() => reject(new Error('start was not ready in five minutes')), START_WITHIN_MS);
    child.stdout.on('data', (chunk: Buffer) => {
      text += chunk.toString();
      if (!text.includes('Ctrl-C stops everything')) return;
      clearTimeout(late);
      resolve();
    });
    void gone.then(() => reject(new Error(`start ended early:\n${text}`)));
  });
  const accounts = JSON.parse(readFileSync(join(data, 'secrets/demo-accounts.json'), 'utf8')) as State['accounts'];
  writeFileSync(STATE, JSON.stringify({ origin: `http://127.0.0.1:${port}`, data, accounts }), { mode: 0o600 });
  return async () => {
    child.kill('SIGINT');
    await gone;
    rmSync(data, { recursive: true, force: true });
    rmSync(STATE, { force: true });
  };
}

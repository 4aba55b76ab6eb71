import { spawn } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { createServer, type AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';

/** An installation of its own: a production build with real services, the demo's people and a night of the bench's. */
export interface BenchInstallation {
  origin: string;
  /** Its data folder, and the process that started its servers. */
  data: string;
  pid: number;
  account: (firstName: string) => { email: string; password: string };
  stop: () => Promise<void>;
}

const START_WITHIN_MS = 5 * 60_000;
const MEASURE_WITHIN_MS = 10 * 60_000;

function freePort(): Promise<number> {
  return new Promise((resolve, reject) => {
    const server = createServer();
    server.once('error', reject);
    server.listen(0, '127.0.0.1', () => {
      const { port } = server.address() as AddressInfo;
      server.close(() => resolve(port));
    });
  });
}

/** Starts one by the README's own command in a folder that goes when it stops, with more in its environment. */
export async function startInstallation(environment: Record<string, string> = {}): Promise<BenchInstallation> {
  const data = mkdtempSync(join(tmpdir(), 'farglow-bench-'));
  const port = await freePort();
  const child = spawn('docker-free-scripts/start', ['--data', data], {
    env: { ...process.env, ...environment, PORT: String(port), DATABASE_URL: undefined },
    stdio: ['ignore', 'pipe', 'inherit'],
  });
  const gone = new Promise<void>((resolve) => child.once('exit', () => resolve()));
  const stop = async () => {
    child.kill('SIGINT');
    await gone;
    rmSync(data, { recursive: true, force: true });
  };
  try {
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
  } catch (error) {
    await stop();
    throw error;
  }
  const accounts = JSON.parse(readFileSync(join(data, 'secrets/demo-accounts.json'), 'utf8')) as {
    name: string;
    email: string;
    password: string;
  }[];
  const account = (firstName: string) => accounts.find(({ name }) => name.startsWith(firstName))!;
  return { origin: `http://127.0.0.1:${port}`, data, pid: child.pid!, account, stop };
}

/**
 * Submits files as a night of their own through the API, with the cookie of whoever is signed in, and waits until all
 * are measured.
 */
export async function submitNight(
  request: (path: string, init?: RequestInit) => Promise<Response>,
  civilDate: string,
  files: readonly { name: string; bytes: Uint8Array }[],
): Promise<string> {
  const made = await request('/api/v1/nights', {
    method: 'POST',
    headers: { 'content-type': 'application/json' },
    body: JSON.stringify({ civilDate }),
  });
  if (!made.ok) throw new Error(`The night was refused: ${await made.text()}`);
  const { id } = (await made.json()) as { id: string };
  for (const { name, bytes } of files) {
    const form = new FormData();
    form.append('file', new Blob([Uint8Array.from(bytes)]), name);
    const answer = await request(`/api/v1/nights/${id}/files`, { method: 'POST', body: form });
    if (answer.status !== 202) throw new Error(`${name} was refused: ${await answer.text()}`);
  }
  for (let waited = 0; waited < MEASURE_WITHIN_MS; waited += 500) {
    const night = (await (await request(`/api/v1/nights/${id}`)).json()) as { done: boolean };
    if (night.done) return id;
    await new Promise((resolve) => setTimeout(resolve, 500));
  }
  throw new Error('the night was not measured in ten minutes');
}

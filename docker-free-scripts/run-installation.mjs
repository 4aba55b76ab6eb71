// One installation in one data folder: servers, migrations, web, worker, demo. Stops what it started, and only that.
import { execFile, spawn } from 'node:child_process';
import { closeSync, existsSync, mkdirSync, openSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { parseArgs, promisify } from 'node:util';
import { buildWhenChanged } from './build-when-changed.mjs';
import { startServices } from './services.mjs';

const run = promisify(execFile);
const pause = (ms) => new Promise((done) => setTimeout(done, ms));
const say = (text) => process.stderr.write(`${text}\n`);

const READY_WITHIN_MS = 60_000;
const CHECK_WITHIN_MS = 10 * 60_000;
const LOOPBACK = ['127.0.0.1', 'localhost', '::1'];

function options() {
  const flag = { type: 'boolean', default: false };
  try {
    const { values } = parseArgs({
      options: { 'no-demo': flag, check: flag, data: { type: 'string', default: 'data' } },
    });
    if (values.check && values['no-demo'])
      throw new Error('--check looks at the demo night: it does not go with --no-demo');
    return { demo: !values['no-demo'], check: values.check, data: resolve(values.data) };
  } catch (error) {
    say(`${error.message}\nSee docker-free-scripts/start --help`);
    process.exit(2);
  }
}

/** One process per data folder: a lock with a dead owner is taken over. */
function lock(dataDir) {
  const path = join(dataDir, 'lock');
  if (existsSync(path)) {
    const owner = Number(readFileSync(path, 'utf8'));
    try {
      process.kill(owner, 0);
      say(`Another start (process ${owner}) uses ${dataDir}. Stop it, or give --data another folder.`);
      process.exit(1);
    } catch (error) {
      if (error.code === 'EPERM') process.exit(1);
    }
  }
  writeFileSync(path, String(process.pid));
  return () => rmSync(path, { force: true });
}

/**
 * A worker's engine threads keep every core busy: the garbage collector's own threads would only wait for one another there,
 * and took as much processor time as the fits did.
 */
const WORKER_FLAGS = ['--single-threaded-gc'];

function launch(script, env, logPath, flags = []) {
  const out = openSync(logPath, 'a');
  const child = spawn(process.execPath, ['--enable-source-maps', ...flags, script], {
    env,
    stdio: ['ignore', out, out],
    detached: true,
  });
  closeSync(out);
  child.gone = new Promise((done) => child.once('exit', (code, signal) => done(signal ?? code)));
  return child;
}

async function stop(child, patienceMs = 12_000) {
  if (child.exitCode !== null || child.signalCode !== null) return;
  child.kill('SIGTERM');
  const late = setTimeout(() => child.kill('SIGKILL'), patienceMs);
  await child.gone;
  clearTimeout(late);
}

async function healthy(origin, children) {
  for (let waited = 0; waited < READY_WITHIN_MS; waited += 200) {
    const ended = children.find((child) => child.exitCode !== null || child.signalCode !== null);
    if (ended) throw new Error('web or worker ended while starting');
    const answer = await fetch(`${origin}/api/v1/health`).catch(() => null);
    if (answer?.ok) return;
    await pause(200);
  }
  throw new Error('web and worker were not ready within a minute');
}

const { demo, check, data } = options();
const port = Number(process.env.PORT ?? 4310);
const host = process.env.HOST ?? '127.0.0.1';
if (demo && !LOOPBACK.includes(host)) {
  say('The demo has printed passwords and is for this machine alone: unset HOST, or use --no-demo.');
  process.exit(2);
}
const origin = process.env.ORIGIN ?? `http://127.0.0.1:${port}`;
const logs = join(data, 'logs');
mkdirSync(logs, { recursive: true });
const unlock = lock(data);

const started = [];
let services;
let ending;
function end(code) {
  ending ??= (async () => {
    for (const child of [...started].reverse()) await stop(child);
    await services?.stop();
    unlock();
    process.exit(code);
  })();
  return ending;
}
for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, () => void end(check ? 1 : 0));

try {
  if (buildWhenChanged()) say('Built.');
  services = await startServices(data);
  const env = {
    ...process.env,
    NODE_ENV: 'production',
    DATABASE_URL: services.databaseUrl('farglow'),
    REDIS_URL: services.redisUrl,
    STORAGE_DIR: join(data, 'storage'),
    DEMO: demo ? '1' : '0',
    DEMO_ACCOUNTS: join(data, 'secrets', 'demo-accounts.json'),
    ORIGIN: origin,
    HOST: host,
    PORT: String(port),
    BODY_SIZE_LIMIT: 'Infinity',
    SHUTDOWN_TIMEOUT: '5',
  };
  // For commands of this installation run from another terminal; readable by its owner alone.
  const own = ['DATABASE_URL', 'REDIS_URL', 'STORAGE_DIR', 'DEMO', 'ORIGIN', 'HOST'];
  const kept = Object.fromEntries(own.map((name) => [name, env[name]]));
  writeFileSync(join(data, 'environment.json'), JSON.stringify(kept, null, 2), { mode: 0o600 });

  const command = (name, ...args) =>
    run(process.execPath, [`build/commands/${name}.js`, ...args], { env, maxBuffer: 1 << 26 });
  await command('migrate');
  started.push(launch('build/worker/main.js', env, join(logs, 'worker.log'), WORKER_FLAGS));
  started.push(launch('build/index.js', env, join(logs, 'web.log')));
  await healthy(origin, started);
  for (const child of [...started, ...services.children]) {
    child.once('exit', () => {
      if (ending) return;
      say(`A part of Farglow ended by itself; the logs are in ${logs}.`);
      void end(1);
    });
  }

  if (demo) {
    if (!existsSync(env.DEMO_ACCOUNTS)) say('Making the demo: a night of an invented observatory.');
    await command('demo');
    const accounts = JSON.parse(readFileSync(env.DEMO_ACCOUNTS, 'utf8'));
    process.stdout.write(`Farglow is at ${origin}\n\nDemo accounts (invented people, for this machine alone):\n`);
    for (const { email, password, roles } of accounts) {
      process.stdout.write(`  ${email.padEnd(34)} ${password.padEnd(20)} ${roles}\n`);
    }
  } else {
    const { stdout } = await command('first-administrator');
    process.stdout.write(`Farglow is at ${origin}\n${stdout}`);
  }
  if (check) {
    const late = setTimeout(() => {
      say('The demo night was not measured in time.');
      void end(1);
    }, CHECK_WITHIN_MS);
    const { stdout } = await command('demo', '--table');
    clearTimeout(late);
    process.stdout.write(`\n${stdout}`);
    await end(0);
  }
  process.stdout.write('\nCtrl-C stops everything that was started here.\n');
} catch (error) {
  if (!ending) {
    say(`Farglow could not start: ${error.stderr || error.message}\nThe logs are in ${logs}.`);
    await end(1);
  }
}

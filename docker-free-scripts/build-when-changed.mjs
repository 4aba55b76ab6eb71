// Builds the web application and the bundles when a source is newer than the last build.
import { execFileSync } from 'node:child_process';
import { existsSync, readdirSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';

const SOURCES = [
  'src',
  'worker',
  'static',
  'package-lock.json',
  'svelte.config.js',
  'vite.config.ts',
  'tailwind.config.ts',
];
const STAMP = 'build/.built';
/** Held by whoever builds, so that two installations started at once do not build over each other. */
const LOCK = 'node_modules/.farglow-building';

function newest(path) {
  const stat = statSync(path);
  if (!stat.isDirectory()) return stat.mtimeMs;
  return readdirSync(path).reduce((latest, name) => Math.max(latest, newest(join(path, name))), stat.mtimeMs);
}

function isAlive(pid) {
  try {
    process.kill(pid, 0);
    return true;
  } catch (error) {
    return error.code === 'EPERM';
  }
}

const pause = (ms) => Atomics.wait(new Int32Array(new SharedArrayBuffer(4)), 0, 0, ms);

function takeLock() {
  for (;;) {
    try {
      writeFileSync(LOCK, String(process.pid), { flag: 'wx' });
      return;
    } catch (error) {
      if (error.code !== 'EEXIST') throw error;
    }
    const owner = existsSync(LOCK) ? Number(readFileSync(LOCK, 'utf8')) : 0;
    // An owner that has just made the file may not have written its number yet.
    if (owner && !isAlive(owner)) rmSync(LOCK, { force: true });
    else pause(200);
  }
}

const isCurrent = (wanted) => existsSync(STAMP) && readFileSync(STAMP, 'utf8') === wanted;

/** Runs `npm run build` where it is due; true if it was. A failed build throws with all it printed. */
export function buildWhenChanged() {
  const wanted = String(Math.max(...SOURCES.map(newest)));
  if (isCurrent(wanted)) return false;
  takeLock();
  try {
    // Another may have built it while we waited.
    if (isCurrent(wanted)) return false;
    execFileSync('npm', ['run', '--silent', 'build'], { stdio: 'pipe', maxBuffer: 1 << 26 });
    writeFileSync(STAMP, wanted);
    return true;
  } catch (error) {
    throw new Error(`the build failed:\n${error.stdout ?? error.message}${error.stderr ?? ''}`);
  } finally {
    rmSync(LOCK, { force: true });
  }
}

// Builds the web application and the bundles when a source is newer than the last build.
import { execFileSync } from 'node:child_process';
import { existsSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs';
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

function newest(path) {
  const stat = statSync(path);
  if (!stat.isDirectory()) return stat.mtimeMs;
  return readdirSync(path).reduce((latest, name) => Math.max(latest, newest(join(path, name))), stat.mtimeMs);
}

/** Runs `npm run build` where it is due; true if it was. A failed build throws with all it printed. */
export function buildWhenChanged() {
  const wanted = String(Math.max(...SOURCES.map(newest)));
  if (existsSync(STAMP) && readFileSync(STAMP, 'utf8') === wanted) return false;
  try {
    execFileSync('npm', ['run', '--silent', 'build'], { stdio: 'pipe', maxBuffer: 1 << 26 });
  } catch (error) {
    throw new Error(`the build failed:\n${error.stdout}${error.stderr}`);
  }
  writeFileSync(STAMP, wanted);
  return true;
}

// Bundles the worker, its threads and the commands to build/, so that they start without a compiler.
import { existsSync, mkdirSync, readdirSync, renameSync, writeFileSync } from 'node:fs';
import { dirname, join, relative, resolve } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { build } from 'esbuild';

const root = fileURLToPath(new URL('..', import.meta.url));
const COMMANDS = join(root, 'src/lib/commands');

/** Command names and the files that make each: its own entry and the entries of its threads (`*-thread.ts`). */
export function commandEntries() {
  return Object.fromEntries(
    readdirSync(COMMANDS)
      .filter((file) => file.endsWith('.ts') && !file.endsWith('.test.ts'))
      .map((file) => {
        const name = file.slice(0, -3);
        const folder = join(COMMANDS, name);
        const threads = existsSync(folder) ? readdirSync(folder).filter((entry) => entry.endsWith('-thread.ts')) : [];
        return [name, [join(COMMANDS, file), ...threads.map((entry) => join(folder, entry))]];
      }),
  );
}

function workerEntries() {
  const threads = join(root, 'worker/threads');
  const files = existsSync(threads) ? readdirSync(threads).filter((file) => /^[a-z-]+\.ts$/.test(file)) : [];
  return [join(root, 'worker/main.ts'), ...files.map((file) => join(threads, file))].filter(existsSync);
}

/** build/commands/measure.js for src/lib/commands/measure.ts, build/worker/main.js for worker/main.ts. */
function outputName(entry) {
  const fromLibrary = relative(join(root, 'src/lib'), entry);
  return (fromLibrary.startsWith('..') ? relative(root, entry) : fromLibrary).slice(0, -3);
}

/**
 * Bundles `entries` into build/. Files are written beside their place and renamed, so that a command started at the
 * same moment sees a whole one. `selfContained` takes the packages in too: quicker to start, and complete by itself.
 */
export async function bundle(entries, { selfContained = false } = {}) {
  const result = await build({
    absWorkingDir: root,
    entryPoints: entries.map((entry) => ({ in: entry, out: outputName(entry) })),
    outdir: join(root, 'build'),
    write: false,
    bundle: true,
    splitting: true,
    chunkNames: 'chunks/[name]-[hash]',
    format: 'esm',
    platform: 'node',
    target: 'node20',
    packages: selfContained ? 'bundle' : 'external',
    alias: { $lib: resolve(root, 'src/lib') },
    sourcemap: 'linked',
    logLevel: 'warning',
  });
  for (const file of result.outputFiles) {
    mkdirSync(dirname(file.path), { recursive: true });
    const partial = `${file.path}.${process.pid}.part`;
    writeFileSync(partial, file.contents);
    renameSync(partial, file.path);
  }
}

/** Commands that measure start on every call of a script, so they carry their packages with them. */
export const SELF_CONTAINED = new Set(['measure']);

async function bundleAll() {
  const commands = commandEntries();
  await bundle(workerEntries());
  for (const [name, entries] of Object.entries(commands)) {
    await bundle(entries, { selfContained: SELF_CONTAINED.has(name) });
  }
}

if (process.argv[1] && pathToFileURL(resolve(process.argv[1])).href === import.meta.url) await bundleAll();

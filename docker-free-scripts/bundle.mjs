// Bundles the worker, its threads and the commands to build/, so that they start without a compiler.
import { existsSync, mkdirSync, readdirSync, renameSync, rmSync, statSync, writeFileSync } from 'node:fs';
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

/** The worker and what its threads run. Each is bundled whole: main finds its threads beside itself. */
function workerEntries() {
  return [join(root, 'worker/main.ts'), join(root, 'worker/threads/work.ts')].filter(existsSync);
}

/** build/commands/measure.js for src/lib/commands/measure.ts, build/worker/main.js for worker/main.ts. */
function outputName(entry) {
  const fromLibrary = relative(join(root, 'src/lib'), entry);
  return (fromLibrary.startsWith('..') ? relative(root, entry) : fromLibrary).slice(0, -3);
}

/** Chunks of earlier builds go after an hour, when no command that began with them can still ask for one. */
const STALE_CHUNK_MS = 3_600_000;

function removeStaleChunks(folder, current) {
  if (!existsSync(folder)) return;
  for (const file of readdirSync(folder)) {
    const path = join(folder, file);
    if (!current.has(path) && statSync(path).mtimeMs < Date.now() - STALE_CHUNK_MS) rmSync(path);
  }
}

/**
 * Bundles `entries` into build/. Files are written beside their place and renamed, so that a command started at the
 * same moment sees a whole one. `selfContained` takes the packages in too: quicker to start, and complete by itself.
 * `chunks` names the folder for parts that entries share or load late; without it every entry is whole.
 */
export async function bundle(entries, { selfContained = false, chunks = null } = {}) {
  const result = await build({
    absWorkingDir: root,
    entryPoints: entries.map((entry) => ({ in: entry, out: outputName(entry) })),
    outdir: join(root, 'build'),
    write: false,
    bundle: true,
    splitting: chunks !== null,
    chunkNames: `${chunks ?? 'chunks'}/[name]-[hash]`,
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
  if (chunks) removeStaleChunks(join(root, 'build', chunks), new Set(result.outputFiles.map((file) => file.path)));
}

/** Commands that measure start on every call of a script, so they carry their packages with them. */
const SELF_CONTAINED = new Set(['measure']);

/** Bundles one command; false where there is none of that name. */
export async function bundleCommand(name) {
  const entries = commandEntries()[name];
  if (!entries) return false;
  await bundle(entries, { selfContained: SELF_CONTAINED.has(name), chunks: `commands/${name}/chunks` });
  return true;
}

async function bundleAll() {
  await bundle(workerEntries());
  for (const name of Object.keys(commandEntries())) await bundleCommand(name);
}

if (process.argv[1] && pathToFileURL(resolve(process.argv[1])).href === import.meta.url) await bundleAll();

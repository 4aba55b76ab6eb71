// Runs a command's bundle: `run-command.mjs NAME ARGUMENTS…`. Bundles it first where a source is newer.
import { existsSync, readdirSync, readFileSync, statSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';

const root = fileURLToPath(new URL('..', import.meta.url));
const [name = '', ...rest] = process.argv.slice(2);

function newest(path) {
  const stat = statSync(path);
  if (!stat.isDirectory()) return stat.mtimeMs;
  return readdirSync(path).reduce((latest, entry) => Math.max(latest, newest(join(path, entry))), 0);
}

/** When any source that a command may take in was last changed: the library without its pages, and the lock file. */
function sourcesChangedAt() {
  const library = join(root, 'src/lib');
  const folders = readdirSync(library)
    .filter((entry) => !['ui', 'charts', 'keys'].includes(entry))
    .map((entry) => join(library, entry));
  return Math.max(
    ...[...folders, join(root, 'package-lock.json'), join(root, 'docker-free-scripts/bundle.mjs')].map(newest),
  );
}

const output = join(root, 'build/commands', `${name}.js`);
if (!existsSync(output) || statSync(output).mtimeMs < sourcesChangedAt()) {
  const { bundleCommand, commandEntries } = await import('./bundle.mjs');
  if (!(await bundleCommand(name))) {
    console.error(`There is no command '${name}'; there are ${Object.keys(commandEntries()).join(', ')}.`);
    process.exit(1);
  }
}
// Commands of an installation find its services where `start` wrote them, unless the environment says otherwise.
const kept = join(process.env.DATA ?? join(root, 'data'), 'environment.json');
if (!process.env.DATABASE_URL && existsSync(kept)) {
  for (const [key, value] of Object.entries(JSON.parse(readFileSync(kept, 'utf8')))) process.env[key] ??= value;
}
process.argv = [process.argv[0], output, ...rest];
await import(pathToFileURL(output).href);

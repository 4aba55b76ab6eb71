// Runs every check in order and counts them: each static check is one, each test is one. The last line is the sum.
import { spawn } from 'node:child_process';
import { resolve } from 'node:path';
import { existsSync, mkdirSync, readFileSync, rmSync } from 'node:fs';

const RESULTS = 'test-results';
rmSync(RESULTS, { recursive: true, force: true });
mkdirSync(RESULTS, { recursive: true });

let passed = 0;
let failed = 0;

function run(command, args, env = {}) {
  return new Promise((done) => {
    const child = spawn(command, args, { stdio: 'inherit', env: { ...process.env, ...env } });
    child.once('error', () => done(127));
    child.once('exit', (code) => done(code ?? 1));
  });
}

async function check(name, script) {
  process.stdout.write(`\n== ${name}\n`);
  const started = Date.now();
  const code = await run('npm', ['run', '--silent', script]);
  if (code === 0) passed++;
  else failed++;
  process.stdout.write(
    `${name}: ${code === 0 ? 'passed' : 'FAILED'} in ${Math.round((Date.now() - started) / 1000)} s\n`,
  );
}

/** Adds a runner's own counts; a runner that ended badly without naming a failed test counts as one. */
function count(code, path, read) {
  const totals = existsSync(path) ? read(JSON.parse(readFileSync(path, 'utf8'))) : { passed: 0, failed: 0 };
  passed += totals.passed;
  failed += totals.failed;
  if (code !== 0 && totals.failed === 0) failed++;
  if (code === 0 && totals.passed === 0) failed++;
}

async function vitest(...projects) {
  process.stdout.write(`\n== ${projects.join(', ')}\n`);
  const path = `${RESULTS}/vitest-${projects[0]}.json`;
  const reporters = ['--reporter=default', '--reporter=json', `--outputFile.json=${path}`];
  const code = await run('npx', ['vitest', 'run', ...projects.flatMap((name) => ['--project', name]), ...reporters]);
  count(code, path, (report) => ({ passed: report.numPassedTests, failed: report.numFailedTests }));
}

async function browser() {
  process.stdout.write('\n== end to end\n');
  const path = resolve(RESULTS, 'playwright.json');
  const args = ['playwright', 'test', '--config', 'tests/e2e/playwright.config.ts', '--reporter=list,json'];
  const code = await run('npx', args, { PLAYWRIGHT_JSON_OUTPUT_FILE: path });
  count(code, path, ({ stats }) => ({ passed: stats.expected, failed: stats.unexpected + stats.flaky }));
}

await check('format', 'format:check');
await check('lint', 'lint');
await check('types', 'types');
await check('imports', 'imports');
await vitest('unit', 'architecture', 'reference');
await check('build', 'build');
await vitest('integration');
await browser();

process.stdout.write(`\n${passed} passed, ${failed} failed\n`);
process.exitCode = failed === 0 ? 0 : 1;

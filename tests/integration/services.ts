import { execFileSync } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { TestProject } from 'vitest/node';
// @ts-expect-error plain JavaScript, so that it runs before anything is installed
import { startServices } from '../../docker-free-scripts/services.mjs';

declare module 'vitest' {
  interface ProvidedContext {
    /** URL of the test run's MariaDB, ending in `/`; databases whose names begin with `farglow` may be made. */
    databaseUrl: string;
    redisUrl: string;
  }
}

/** One pair of servers a run, in a folder that goes with it; each test file has a database and queue prefix of its own. */
export default async function setup(project: TestProject) {
  // Workers run from the bundle, as they do in an installation.
  execFileSync(process.execPath, ['docker-free-scripts/bundle.mjs'], { stdio: 'inherit' });
  const folder = mkdtempSync(join(tmpdir(), 'farglow-test-'));
  const services = await startServices(folder);
  project.provide('databaseUrl', services.databaseUrl(''));
  project.provide('redisUrl', services.redisUrl);
  return async () => {
    await services.stop();
    rmSync(folder, { recursive: true, force: true });
  };
}

import { closeDatabase } from '$lib/server/database/connection';
import { config } from '$lib/server/config/config';
import { closeNudges } from '$lib/server/queue/nudge';
import { closeRedis } from '$lib/server/queue/redis';
import { demoTable, makeDemo } from './demo/make-demo';

/** Makes the demo where it is missing, waits until its night is measured; `--table` prints the redshifts. */
async function main(): Promise<void> {
  if (!config().DEMO)
    throw new Error('The demo is for installations with DEMO=1: it makes accounts with printed passwords.');
  const { observer, nightId } = await makeDemo(process.env.DEMO_ACCOUNTS ?? 'data/secrets/demo-accounts.json');
  if (process.argv.includes('--table')) process.stdout.write(await demoTable(observer, nightId));
}

await main().finally(async () => {
  closeNudges();
  await closeRedis();
  await closeDatabase();
});

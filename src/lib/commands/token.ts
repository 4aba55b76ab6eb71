import { parseArgs } from 'node:util';
import { z } from 'zod';
import { Refusal } from '$lib/domain/refusal';
import { makeToken } from '$lib/server/accounts/make-token';
import { closeDatabase } from '$lib/server/database/connection';

const USAGE = 'usage: npm run --silent token -- --email E --scope "read submit review publish" [--days 90]';

const optionsSchema = z.object({
  email: z.email(),
  scope: z.string().min(1),
  days: z.coerce.number().int().min(1).max(3650).default(90),
});

/** Makes a bearer token and prints it, alone, on standard output. */
async function main(): Promise<number> {
  const option = { type: 'string' } as const;
  try {
    const { values } = parseArgs({ options: { email: option, scope: option, days: option } });
    process.stdout.write(`${await makeToken(optionsSchema.parse(values))}\n`);
    return 0;
  } catch (error) {
    const expected = error instanceof Refusal || error instanceof z.ZodError || error instanceof TypeError;
    if (!expected) throw error;
    const reason =
      error instanceof z.ZodError
        ? error.issues.map((i) => `${i.path.join('.')}: ${i.message}`).join('; ')
        : error.message;
    process.stderr.write(`${reason}\n${USAGE}\n`);
    return 2;
  } finally {
    await closeDatabase();
  }
}

process.exitCode = await main();

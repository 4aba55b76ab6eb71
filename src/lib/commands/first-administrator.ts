import { inviteFirstAdministrator } from '$lib/server/accounts/make-first-administrator';
import { config } from '$lib/server/config/config';
import { closeDatabase } from '$lib/server/database/connection';

/** Prints a one-time link that makes the first administrator; says so where there is one already. */
const secret = await inviteFirstAdministrator().finally(closeDatabase);
process.stdout.write(
  secret
    ? `\nMake the first administrator within 48 hours, once, at\n  ${config().ORIGIN}/welcome/${secret}\n`
    : 'Sign in with your account.\n',
);

import { closeDatabase } from '$lib/server/database/connection';
import { migrate } from '$lib/server/database/migrate';

/** Applies the migrations that the database lacks, and says which. */
const applied = await migrate().finally(closeDatabase);
process.stdout.write(applied.length ? `applied ${applied.join(', ')}\n` : 'the schema is current\n');

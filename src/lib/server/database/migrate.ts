import { QueryTypes, type Sequelize } from 'sequelize';
import { Umzug } from 'umzug';
import { log } from '../log/log';
import { database } from './connection';
import * as firstLight from './migrations/0001-first-light';
import * as reviewTogether from './migrations/0002-review-together';
import * as nightReport from './migrations/0003-night-report';
import * as uploads from './migrations/0004-uploads';
import * as instruments from './migrations/0005-instruments';
import * as targets from './migrations/0006-targets';
import * as reviewTrust from './migrations/0007-review-trust';
import * as reviewMasks from './migrations/0008-review-masks';

/** Imported statically, so that bundles carry them; a new one is appended here. */
const MIGRATIONS = [firstLight, reviewTogether, nightReport, uploads, instruments, targets, reviewTrust, reviewMasks];

function migrator(sequelize: Sequelize): Umzug<Sequelize> {
  return new Umzug({
    context: sequelize,
    logger: undefined,
    migrations: MIGRATIONS.map((migration) => ({
      name: migration.name,
      up: async () => {
        // MariaDB's DDL commits as it goes: each statement can be run again after a kill.
        for (const statement of migration.statements) await sequelize.query(statement);
      },
    })),
    storage: {
      async executed() {
        await sequelize.query(
          `CREATE TABLE IF NOT EXISTS migrations (name VARCHAR(100) NOT NULL PRIMARY KEY,
            applied_at DATETIME(6) NOT NULL DEFAULT UTC_TIMESTAMP(6)) ENGINE=InnoDB`,
        );
        const rows = await sequelize.query<{ name: string }>('SELECT name FROM migrations', {
          type: QueryTypes.SELECT,
        });
        return rows.map((row) => row.name);
      },
      async logMigration({ name }) {
        await sequelize.query('INSERT IGNORE INTO migrations (name) VALUES (?)', { replacements: [name] });
      },
      async unlogMigration({ name }) {
        await sequelize.query('DELETE FROM migrations WHERE name = ?', { replacements: [name] });
      },
    },
  });
}

/** Applies what is missing, one process at a time (GET_LOCK); returns the names applied. */
export async function migrate(): Promise<string[]> {
  const sequelize = database();
  // The lock belongs to a connection, so it is held on one of its own while the steps run on others.
  return sequelize.transaction(async (transaction) => {
    const take = { type: QueryTypes.SELECT, transaction } as const;
    const [lock] = await sequelize.query<{ held: number }>("SELECT GET_LOCK('farglow-migrate', 120) AS held", take);
    if (lock.held !== 1)
      throw new Error('Another process has been migrating for two minutes; try again when it is done.');
    try {
      const applied = await migrator(sequelize).up();
      for (const { name } of applied) log.info({ migration: name }, 'migration applied');
      return applied.map(({ name }) => name);
    } finally {
      await sequelize.query("SELECT RELEASE_LOCK('farglow-migrate')", take);
    }
  });
}

/** Names of steps this code needs and the database lacks. A process with any refuses to run. */
export async function pendingMigrations(): Promise<string[]> {
  return (await migrator(database()).pending()).map(({ name }) => name);
}

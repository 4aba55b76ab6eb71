import { Sequelize, Transaction } from 'sequelize';
import { config } from '../config/config';
import { log } from '../log/log';
import { defineModels } from './models/models';

// Hot reload evaluates modules again; the pool must not multiply with it.
const kept = globalThis as { farglowDatabase?: Sequelize };

/** The process's one connection pool. Times are UTC; a session runs in strict SQL mode at READ COMMITTED. */
export function database(): Sequelize {
  if (kept.farglowDatabase) return kept.farglowDatabase;
  kept.farglowDatabase = new Sequelize(config().DATABASE_URL.replace(/^mysql:/, 'mariadb:'), {
    dialect: 'mariadb',
    timezone: '+00:00',
    logging: (sql, ms) => log.trace({ sql, ms }, 'sql'),
    benchmark: true,
    pool: { max: config().DATABASE_POOL, min: 0, idle: 10_000, acquire: 15_000 },
    define: { timestamps: false, underscored: true, freezeTableName: true },
    isolationLevel: Transaction.ISOLATION_LEVELS.READ_COMMITTED,
    dialectOptions: {
      connectTimeout: 5_000,
      initSql: ["SET SESSION sql_mode = 'STRICT_ALL_TABLES,NO_ENGINE_SUBSTITUTION,ERROR_FOR_DIVISION_BY_ZERO'"],
    },
  });
  defineModels(kept.farglowDatabase);
  return kept.farglowDatabase;
}

/** Closes the pool, so that the process can end. */
export async function closeDatabase(): Promise<void> {
  await kept.farglowDatabase?.close();
  kept.farglowDatabase = undefined;
}

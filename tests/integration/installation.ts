import { randomBytes } from 'node:crypto';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { Sequelize } from 'sequelize';
import { inject } from 'vitest';
import { actorOf } from '$lib/server/auth/actor';
import type { Actor, Role } from '$lib/server/auth/permissions';
import { closeDatabase, database } from '$lib/server/database/connection';
import { migrate } from '$lib/server/database/migrate';
import { Programme, ProgrammeMember, User } from '$lib/server/database/queries/people';
import { closeNudges } from '$lib/server/queue/nudge';
import { closeRedis } from '$lib/server/queue/redis';

export interface Installation {
  /** The environment that a worker or web process of this installation needs. */
  env: Record<string, string>;
  makeProgramme(slug: string): Promise<string>;
  /** A person with these roles in a programme, as an actor by session. */
  makePerson(name: string, programmeId: string, roles: Role[]): Promise<Actor>;
  /** The actor again, with roles as they are now. */
  refresh(actor: Actor): Promise<Actor>;
  destroy(): Promise<void>;
}

/** A fresh migrated database, queue prefix and storage folder; this process's configuration points at them. */
export async function makeInstallation(): Promise<Installation> {
  const name = `farglow_${randomBytes(6).toString('hex')}`;
  const folder = mkdtempSync(join(tmpdir(), 'farglow-storage-'));
  const env = {
    DATABASE_URL: `${inject('databaseUrl')}${name}`,
    REDIS_URL: inject('redisUrl'),
    STORAGE_DIR: folder,
    QUEUE_PREFIX: name.replace('_', '-'),
    ORIGIN: 'http://127.0.0.1:4399',
    LOG_LEVEL: process.env.TEST_LOG_LEVEL ?? 'silent',
    WORKER_THREADS: '2',
  };
  Object.assign(process.env, env);
  const server = new Sequelize(`${inject('databaseUrl')}information_schema`, { dialect: 'mariadb', logging: false });
  await server.query(`CREATE DATABASE ${name} CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_ci`);
  await migrate();
  return {
    env,
    async makeProgramme(slug) {
      database();
      const { id } = await Programme.create({ slug, name: `Programme ${slug}` } as never);
      return id;
    },
    async makePerson(personName, programmeId, roles) {
      const email = `${personName.toLowerCase().replaceAll(' ', '.')}@example.org`;
      const user = await User.create({ email, name: personName, passwordHash: null } as never);
      await ProgrammeMember.bulkCreate(roles.map((role) => ({ programmeId, userId: user.id, role })));
      return (await actorOf(user.id))!;
    },
    async refresh(actor) {
      return (await actorOf(actor.userId, actor.scopes))!;
    },
    async destroy() {
      closeNudges();
      await closeRedis();
      await closeDatabase();
      await server.query(`DROP DATABASE ${name}`);
      await server.close();
      rmSync(folder, { recursive: true, force: true });
    },
  };
}

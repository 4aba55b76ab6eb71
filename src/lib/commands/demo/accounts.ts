import { randomBytes } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { dirname } from 'node:path';
import type { Instrument } from '$lib/domain/instrument';
import { makeAccount } from '$lib/server/accounts/make-account';
import { actorOf } from '$lib/server/auth/actor';
import type { Actor } from '$lib/server/auth/permissions';
import { database } from '$lib/server/database/connection';
import { findProgramme } from '$lib/server/database/queries/nights';
import { User } from '$lib/server/database/queries/people';
import { makeProgramme } from '$lib/server/programmes/make-programme';
import { DEMO_PEOPLE, type DemoAccount } from './people';

const SLUG = 'ch-26b-017';

/** The passwords of this data folder: random, made once, readable by its owner alone. */
function keptAccounts(path: string): DemoAccount[] {
  if (existsSync(path)) return JSON.parse(readFileSync(path, 'utf8')) as DemoAccount[];
  const accounts = DEMO_PEOPLE.map(({ name, email, roles, isAdmin }) => ({
    name,
    email,
    password: randomBytes(12).toString('base64url'),
    roles: [...roles, ...(isAdmin ? ['administrator'] : [])].join(', '),
  }));
  mkdirSync(dirname(path), { recursive: true, mode: 0o700 });
  writeFileSync(path, JSON.stringify(accounts, null, 2), { mode: 0o600 });
  return accounts;
}

/** Makes what is missing of the demo's programme, instrument and people; returns them as actors by first name. */
export async function makeDemoPeople(
  accountsPath: string,
  instrument: Instrument,
): Promise<{ programmeId: string; programme: string; actors: Map<string, Actor> }> {
  const accounts = keptAccounts(accountsPath);
  const found = await findProgramme(SLUG);
  const name = 'Emission lines at Cape Halloran';
  const programmeId = found?.id ?? (await makeProgramme({ slug: SLUG, name, instrument, isDemo: true })).programmeId;
  const actors = new Map<string, Actor>();
  database();
  for (const { name: person, email, roles, isAdmin = false } of DEMO_PEOPLE) {
    const user = await User.findOne({ where: { email } });
    const { password } = accounts.find((account) => account.email === email)!;
    const userId =
      user?.id ??
      (await makeAccount({ name: person, email, password, programmeId, roles, isAdmin, isDemo: true })).userId;
    actors.set(person.split(' ')[0], (await actorOf(userId))!);
  }
  return { programmeId, programme: SLUG, actors };
}

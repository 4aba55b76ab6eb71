import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { acceptInvitation, inviteFirstAdministrator } from '$lib/server/accounts/make-first-administrator';
import { actorOf } from '$lib/server/auth/actor';
import type { Actor } from '$lib/server/auth/permissions';
import { createNight } from '$lib/server/ingest/create-night';
import { foundProgramme } from '$lib/server/programmes/found-programme';
import { listProgrammes } from '$lib/server/programmes/list-programmes';
import { makeInstallation, type Installation } from './installation';

let installation: Installation;
let admin: Actor;
beforeAll(async () => {
  installation = await makeInstallation();
  const secret = (await inviteFirstAdministrator())!;
  const account = { name: 'Ada Min', email: 'ada@example.org', password: 'twelve grey herons' };
  admin = (await actorOf((await acceptInvitation(secret, account)).userId))!;
});
afterAll(() => installation.destroy());

describe('a fresh installation', () => {
  it('lets its administrator found a programme and open a night in it', async () => {
    expect(await listProgrammes(admin)).toEqual([]);
    await foundProgramme(admin, { name: 'Deep fields', slug: 'df-1' });
    admin = await installation.refresh(admin);
    expect(await listProgrammes(admin)).toMatchObject([{ slug: 'df-1', name: 'Deep fields' }]);
    await expect(createNight(admin, { civilDate: '2026-11-14', notes: '' })).resolves.toMatchObject({
      id: expect.any(String),
    });
  });

  it('refuses a short name that is taken, and anyone who is no administrator', async () => {
    await expect(foundProgramme(admin, { name: 'Again', slug: 'df-1' })).rejects.toMatchObject({
      code: 'conflict',
      where: 'slug',
    });
    const other = await installation.makePerson('Cura Tor', await installation.makeProgramme('other'), ['curator']);
    await expect(foundProgramme(other, { name: 'Mine', slug: 'mine' })).rejects.toMatchObject({ code: 'forbidden' });
    await expect(foundProgramme(null, { name: 'Mine', slug: 'mine' })).rejects.toMatchObject({ code: 'not-signed-in' });
  });
});

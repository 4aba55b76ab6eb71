import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { changePassword } from '$lib/server/accounts/change-password';
import { endSessions } from '$lib/server/accounts/end-sessions';
import { makeOwnToken } from '$lib/server/accounts/make-own-token';
import { readAccount } from '$lib/server/accounts/read-account';
import { renameAccount } from '$lib/server/accounts/rename-account';
import { revokeToken } from '$lib/server/accounts/revoke-token';
import { signIn } from '$lib/server/accounts/sign-in';
import { makeAccount } from '$lib/server/accounts/make-account';
import { actorOf, actorOfToken } from '$lib/server/auth/actor';
import { may, type Actor } from '$lib/server/auth/permissions';
import { readSession } from '$lib/server/auth/sessions';
import { ApiToken } from '$lib/server/database/queries/people';
import { makeInstallation, type Installation } from './installation';

const email = 'ona@example.org';
const password = 'nine slow tortoises';

let installation: Installation;
let programmeId: string;
let actor: Actor;
let other: Actor;

beforeAll(async () => {
  installation = await makeInstallation();
  programmeId = await installation.makeProgramme('account');
  const account = { name: 'Ona Server', email, password, programmeId, roles: ['observer' as const] };
  actor = (await actorOf((await makeAccount({ ...account, isAdmin: false, isDemo: false })).userId))!;
  other = await installation.makePerson('Oth Er', programmeId, ['observer']);
});
afterAll(() => installation.destroy());

const enter = async (word = password) => (await signIn({ email, password: word }, '127.0.0.1', null)).value;

describe('sessions', () => {
  it('are listed with the present one marked, and end one by one or all but this', async () => {
    const [here, there, elsewhere] = [await enter(), await enter(), await enter()];
    const { sessions } = await readAccount(actor, here);
    expect(sessions).toHaveLength(3);
    expect(sessions.filter(({ isThis }) => isThis)).toHaveLength(1);
    expect(JSON.stringify(sessions)).not.toContain(here);
    expect(Math.abs(Date.parse(sessions[0].startedAt) - Date.now())).toBeLessThan(60_000);
    const one = sessions.find(({ isThis }) => !isThis)!;
    expect(await endSessions(other, 'none', one.id)).toBe(0);
    expect(await endSessions(actor, here, one.id)).toBe(1);
    expect(await endSessions(actor, here, null)).toBe(1);
    expect(await readSession(here)).not.toBeNull();
    expect([await readSession(there), await readSession(elsewhere)]).toEqual([null, null]);
  });
});

describe('the password', () => {
  it('changes after the present one, and every other session ends', async () => {
    const [here, there] = [await enter(), await enter()];
    const next = 'ten slow tortoises';
    const wrong = { current: 'not this one', password: next };
    await expect(changePassword(actor, wrong, '127.0.0.1', here)).rejects.toMatchObject({ where: 'current' });
    await changePassword(actor, { current: password, password: next }, '127.0.0.1', here);
    expect(await readSession(there)).toBeNull();
    expect(await readSession(here)).not.toBeNull();
    await expect(enter()).rejects.toMatchObject({ code: 'not-signed-in' });
    await expect(enter(next)).resolves.toBeTruthy();
  });
  it('cannot be guessed at from an open session without end', async () => {
    const guess = () => changePassword(actor, { current: 'guess', password: 'x'.repeat(12) }, '10.0.0.9', 'none');
    for (let i = 0; i < 10; i++) await guess().catch(() => {});
    await expect(guess()).rejects.toMatchObject({ code: 'too-many' });
  });
});

describe('tokens', () => {
  it('are shown once, kept as hashes, carry their scopes, and open nothing once revoked', async () => {
    const token = await makeOwnToken(actor, { name: 'night script', scopes: ['submit', 'read'], days: 7 });
    expect(await ApiToken.count({ where: { tokenHash: token } })).toBe(0);
    const account = await readAccount(actor, null);
    expect(account.tokens).toMatchObject([{ name: 'night script', scope: 'read submit', hasRunOut: false }]);
    expect(JSON.stringify(account)).not.toContain(token);
    const bearer = (await actorOfToken(token))!;
    expect([may(bearer, 'night.submit', programmeId), may(bearer, 'spectrum.judge', programmeId)]).toEqual([
      true,
      false,
    ]);
    const { id } = account.tokens[0];
    await expect(revokeToken(other, id)).rejects.toMatchObject({ code: 'not-found' });
    await revokeToken(actor, id);
    expect(await actorOfToken(token)).toBeNull();
  });
  it('manage no account themselves', async () => {
    const token = await makeOwnToken(actor, { name: 'thief', scopes: ['read'], days: 1 });
    const bearer = await actorOfToken(token);
    const more = { name: 'longer', scopes: ['publish' as const], days: 366 };
    await expect(makeOwnToken(bearer, more)).rejects.toMatchObject({ code: 'forbidden' });
    await expect(readAccount(bearer, null)).rejects.toMatchObject({ code: 'forbidden' });
    await expect(renameAccount(bearer, { name: 'X' })).rejects.toMatchObject({ code: 'forbidden' });
    await expect(readAccount(null, null)).rejects.toMatchObject({ code: 'not-signed-in' });
  });
});

describe('the profile', () => {
  it('takes a new name', async () => {
    await renameAccount(actor, { name: 'Ona B. Server' });
    expect((await actorOf(actor.userId))!.name).toBe('Ona B. Server');
  });
});

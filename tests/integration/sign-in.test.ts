import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { acceptInvitation, inviteFirstAdministrator } from '$lib/server/accounts/make-first-administrator';
import { makeToken } from '$lib/server/accounts/make-token';
import { signIn } from '$lib/server/accounts/sign-in';
import { actorOfToken } from '$lib/server/auth/actor';
import { may } from '$lib/server/auth/permissions';
import { endSession, readSession } from '$lib/server/auth/sessions';
import { Session } from '$lib/server/database/queries/people';
import { makeInstallation, type Installation } from './installation';

let installation: Installation;
beforeAll(async () => void (installation = await makeInstallation()));
afterAll(() => installation.destroy());

const password = 'twelve grey herons';

describe('the first administrator', () => {
  it('is made once by a one-time secret, which then opens nothing', async () => {
    const secret = (await inviteFirstAdministrator())!;
    const { userId } = await acceptInvitation(secret, { name: 'Ada Min', email: 'ada@example.org', password });
    expect(userId).toMatch(/^[0-9a-f-]{36}$/);
    await expect(acceptInvitation(secret, { name: 'B', email: 'b@example.org', password })).rejects.toMatchObject({
      code: 'forbidden',
    });
    expect(await inviteFirstAdministrator()).toBeNull();
  });
});

describe('signIn', () => {
  it('starts a session whose id is stored only as a hash, and ends it', async () => {
    const cookie = await signIn({ email: 'ada@example.org', password }, '127.0.0.1', null);
    expect(cookie.name).toMatch(/^__Host-/);
    expect(cookie.options).toMatchObject({ httpOnly: true, secure: true, sameSite: 'lax' });
    expect(await Session.findByPk(cookie.value)).toBeNull();
    expect(await readSession(cookie.value)).toMatchObject({ userId: expect.any(String) });
    await endSession(cookie.value);
    expect(await readSession(cookie.value)).toBeNull();
  });

  it('ends the session that was there before', async () => {
    const first = await signIn({ email: 'ada@example.org', password }, '127.0.0.1', null);
    await signIn({ email: 'ada@example.org', password }, '127.0.0.1', first.value);
    expect(await readSession(first.value)).toBeNull();
  });

  it('answers a wrong password and an unknown account in the same words', async () => {
    const wrong = await signIn({ email: 'ada@example.org', password: 'wrong' }, '10.0.0.1', null).catch(
      (e: Error) => e,
    );
    const unknown = await signIn({ email: 'nobody@example.org', password }, '10.0.0.1', null).catch((e: Error) => e);
    expect((wrong as Error).message).toBe((unknown as Error).message);
  });

  it('throttles a network without locking the account for others', async () => {
    for (let i = 0; i < 10; i++)
      await signIn({ email: 'ada@example.org', password: 'wrong' }, '10.0.0.2', null).catch(() => {});
    await expect(signIn({ email: 'ada@example.org', password }, '10.0.0.2', null)).rejects.toMatchObject({
      code: 'too-many',
    });
    await expect(signIn({ email: 'ada@example.org', password }, '10.0.0.3', null)).resolves.toBeTruthy();
  });
});

describe('bearer tokens', () => {
  it('carry their scopes and no more', async () => {
    const programme = await installation.makeProgramme('tokens');
    const person = await installation.makePerson('Olli Server', programme, ['observer', 'scientist']);
    const token = await makeToken({ email: person.email, scope: 'read', days: 1 });
    const actor = await actorOfToken(token);
    expect(may(actor, 'night.read', programme)).toBe(true);
    expect(may(actor, 'night.submit', programme)).toBe(false);
    expect(await actorOfToken(`${token}x`)).toBeNull();
  });

  it('run out', async () => {
    const token = await makeToken({ email: 'ada@example.org', scope: 'read', days: -1 });
    expect(await actorOfToken(token)).toBeNull();
  });

  it('refuse a scope that is none, naming those there are', async () => {
    await expect(makeToken({ email: 'ada@example.org', scope: 'everything', days: 1 })).rejects.toThrow(
      /read, submit, review, publish/,
    );
  });
});

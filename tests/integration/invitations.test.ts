import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { joinProgramme } from '$lib/server/accounts/join-programme';
import { acceptInvitation } from '$lib/server/accounts/make-first-administrator';
import { readInvitation } from '$lib/server/accounts/read-invitation';
import { may, type Actor } from '$lib/server/auth/permissions';
import { database } from '$lib/server/database/connection';
import { inviteMember } from '$lib/server/programmes/invite-member';
import { listInvitations } from '$lib/server/programmes/list-invitations';
import { withdrawInvitation } from '$lib/server/programmes/withdraw-invitation';
import { makeInstallation, type Installation } from './installation';

let installation: Installation;
let programme: string;
let other: string;
let curator: Actor;
let observer: Actor;

beforeAll(async () => {
  installation = await makeInstallation();
  programme = await installation.makeProgramme('inviting');
  other = await installation.makeProgramme('another');
  curator = await installation.makePerson('Cura Tor', programme, ['curator']);
  observer = await installation.makePerson('Ola Server', other, ['observer']);
});
afterAll(() => installation.destroy());

/** Without a mail server the link comes back. */
const invite = async (email: string, roles: ('observer' | 'scientist' | 'curator')[]) => {
  const { link } = await inviteMember(curator, { programme, email, roles });
  expect(link).toMatch(/^http:\/\/127\.0\.0\.1:4399\/welcome\/fgi_[\w-]{43}$/);
  return link!.split('/').pop()!;
};

describe('an invitation handed over as a link', () => {
  it('adds its roles to an account that is there, whatever roles that has elsewhere', async () => {
    const secret = await invite(observer.email, ['scientist']);
    expect(await readInvitation(secret)).toEqual({
      kind: 'programme',
      email: observer.email,
      programme: 'Programme inviting',
      roles: ['scientist'],
      invitedBy: 'Cura Tor',
      hasAccount: true,
    });
    await joinProgramme(observer, secret);
    const now = await installation.refresh(observer);
    expect([may(now, 'spectrum.judge', programme), may(now, 'night.submit', other)]).toEqual([true, true]);
    expect(may(now, 'night.submit', programme)).toBe(false);
    await expect(readInvitation(secret)).rejects.toMatchObject({ code: 'forbidden' });
    await expect(
      inviteMember(curator, { programme, email: observer.email, roles: ['scientist'] }),
    ).rejects.toMatchObject({
      code: 'conflict',
    });
  });

  it('opens nothing once it was taken back, replaced, or has run out', async () => {
    const account = { name: 'Late', email: 'late@example.org', password: 'five white herons' };
    const first = await invite('late@example.org', ['observer']);
    const second = await invite('late@example.org', ['observer']);
    await expect(acceptInvitation(first, account)).rejects.toMatchObject({ code: 'forbidden' });
    const { invitations } = await listInvitations(curator);
    expect(invitations.map(({ email }) => email)).toEqual(['late@example.org']);
    await withdrawInvitation(curator, programme, invitations[0].id);
    await expect(acceptInvitation(second, account)).rejects.toMatchObject({ code: 'forbidden' });
    const third = await invite('late@example.org', ['observer']);
    await database().query(`UPDATE invitations SET expires_at = UTC_TIMESTAMP(6) - INTERVAL 1 SECOND`);
    await expect(readInvitation(third)).rejects.toMatchObject({ code: 'forbidden' });
    expect((await listInvitations(curator)).invitations).toEqual([]);
  });

  it('makes one account where its link is used twice at once', async () => {
    const secret = await invite('twice@example.org', ['observer']);
    const account = { name: 'Twice', email: 'twice@example.org', password: 'five white herons' };
    const results = await Promise.allSettled([acceptInvitation(secret, account), acceptInvitation(secret, account)]);
    expect(results.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
  });

  it('is a curator’s to give, in the own programme, by a session', async () => {
    const wanted = { email: 'x@example.org', roles: ['observer' as const] };
    const scientist = await installation.refresh(observer);
    await expect(inviteMember(scientist, { ...wanted, programme })).rejects.toMatchObject({ code: 'forbidden' });
    await expect(inviteMember(curator, { ...wanted, programme: other })).rejects.toMatchObject({ code: 'not-found' });
    const bearer: Actor = { ...curator, scopes: new Set(['publish'] as const) };
    await expect(inviteMember(bearer, { ...wanted, programme })).rejects.toMatchObject({ code: 'forbidden' });
    await expect(joinProgramme(bearer, 'fgi_x')).rejects.toMatchObject({ code: 'forbidden' });
    expect(await listInvitations(scientist)).toEqual({ mayInvite: [], invitations: [] });
    await invite('mine@example.org', ['observer']);
    const { invitations } = await listInvitations(curator);
    const [mine] = invitations.filter(({ email }) => email === 'mine@example.org');
    await expect(withdrawInvitation(scientist, programme, mine.id)).rejects.toMatchObject({ code: 'forbidden' });
  });
});

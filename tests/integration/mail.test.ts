import type { ChildProcess } from 'node:child_process';
import { QueryTypes } from 'sequelize';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { joinProgramme } from '$lib/server/accounts/join-programme';
import { acceptInvitation } from '$lib/server/accounts/make-first-administrator';
import { may, type Actor } from '$lib/server/auth/permissions';
import { actorOf } from '$lib/server/auth/actor';
import { database } from '$lib/server/database/connection';
import { postReports } from '$lib/server/ingest/post-reports';
import { inviteMember } from '$lib/server/programmes/invite-member';
import { listInvitations } from '$lib/server/programmes/list-invitations';
import { makeInstallation, type Installation } from './installation';
import { startMailCatcher, type MailCatcher } from './mail-catcher';
import { seedNight } from './seed-spectra';
import { startWorker, until } from './worker-process';

let catcher: MailCatcher;
let installation: Installation;
let programme: string;
let curator: Actor;
let worker: (ChildProcess & { gone: Promise<void> }) | undefined;

beforeAll(async () => {
  catcher = await startMailCatcher();
  const mail = { SMTP_URL: catcher.url, MAIL_FROM: 'Farglow <farglow@observatory.example>' };
  Object.assign(process.env, mail);
  installation = await makeInstallation();
  programme = await installation.makeProgramme('letters');
  curator = await installation.makePerson('Cura Tor', programme, ['curator']);
  worker = startWorker({ ...installation.env, ...mail });
});
afterAll(async () => {
  worker?.kill('SIGKILL');
  await worker?.gone;
  await installation.destroy();
  await catcher.close();
});

const letterTo = (address: string, count = 1) =>
  until(`letter ${count} to ${address}`, async () => {
    const letters = catcher.caught.filter(({ to }) => to.includes(address));
    return letters.length >= count && letters[count - 1];
  });
const secretIn = (text: string) => /\/welcome\/(fgi_[\w-]{43})/.exec(text)![1];

describe('an invitation by mail', () => {
  it('reaches the address with a link that makes an account with its roles, once', async () => {
    const email = 'new.person@example.org';
    const answer = await inviteMember(curator, { programme, email, roles: ['observer', 'scientist'] });
    expect(answer.link).toBeNull();
    const letter = await letterTo(email);
    expect(letter.raw).toMatch(/^From: Farglow <farglow@observatory\.example>\r?$/m);
    expect(letter.raw).toMatch(/^Subject: Invitation to Programme letters\r?$/m);
    expect(letter.text).toContain(
      'Cura Tor invites you to the programme "Programme letters" (letters) as observer, scientist.',
    );
    expect(letter.text).toContain('http://127.0.0.1:4399/welcome/');
    const secret = secretIn(letter.text);
    const account = { name: 'New Person', email: 'another@example.org', password: 'seven green lanterns' };
    const { userId } = await acceptInvitation(secret, account);
    const actor = (await actorOf(userId))!;
    expect(actor.email).toBe(email);
    expect([may(actor, 'night.submit', programme), may(actor, 'catalogue.draft', programme)]).toEqual([true, false]);
    await expect(acceptInvitation(secret, account)).rejects.toMatchObject({ code: 'forbidden' });
    await expect(joinProgramme(curator, secret)).rejects.toMatchObject({ code: 'forbidden' });
  });

  it('keeps its secret out of the database and the queue, and is sent once', async () => {
    const email = 'quiet@example.org';
    await inviteMember(curator, { programme, email, roles: ['collaborator'] });
    const secret = secretIn((await letterTo(email)).text);
    await until('the letter settled', async () => {
      const { invitations } = await listInvitations(curator);
      return invitations.find((invitation) => invitation.email === email)?.letter === 'sent';
    });
    const rows = await database().query('SELECT * FROM invitations', { type: QueryTypes.SELECT });
    expect(JSON.stringify(rows)).not.toContain(secret);
    const [{ left }] = await database().query<{ left: number | string }>(
      `SELECT COUNT(*) AS \`left\` FROM outbox WHERE job_name = 'mail'`,
      { type: QueryTypes.SELECT },
    );
    expect(Number(left)).toBe(0);
    expect(catcher.caught.filter(({ to }) => to.includes(email))).toHaveLength(1);
  });

  it('tells the curator of an address that the mail server refuses for good', async () => {
    catcher.refuse(550);
    const email = 'nobody@example.org';
    await inviteMember(curator, { programme, email, roles: ['observer'] });
    const failed = await until('the refusal', async () => {
      const { invitations } = await listInvitations(curator);
      return invitations.find((invitation) => invitation.email === email && invitation.letter === 'failed');
    });
    expect(failed.problem).toContain('no such mailbox');
    catcher.refuse(null);
  });

  it('goes out after all where the mail server was busy for a while', async () => {
    const before = catcher.refusals();
    catcher.refuse(451);
    const email = 'patient@example.org';
    await inviteMember(curator, { programme, email, roles: ['observer'] });
    await until('a first try', async () => catcher.refusals() > before);
    catcher.refuse(null);
    expect(secretIn((await letterTo(email)).text)).toMatch(/^fgi_/);
  });
});

describe('the report of a night by mail', () => {
  const MINUTE = 60_000;
  const inMinutes = (minutes: number) => new Date(Date.now() + minutes * MINUTE);

  it('goes once to whoever opened the night, when it is over and at rest', async () => {
    const observer = await installation.makePerson('Ola Server', programme, ['observer']);
    const { nightId } = await seedNight(programme, observer.userId, [
      { name: 'fine' },
      { name: 'HC doubtful', confidence: 'probable', probability: 0.95 },
    ]);
    await database().query(`UPDATE files SET state = 'read'`);
    // The seeded night names a date; the one that counts here is over by the machine's clock.
    await database().query(`UPDATE nights SET civil_date = UTC_DATE() - INTERVAL 3 DAY WHERE id = :nightId`, {
      replacements: { nightId },
    });
    expect(await postReports(inMinutes(5))).toBe(0);
    const posted = await Promise.all([postReports(inMinutes(11)), postReports(inMinutes(11))]);
    expect(Math.max(...posted)).toBe(1);
    const letter = await letterTo(observer.email);
    expect(letter.raw).toMatch(/^Subject: Night of \d{4}-\d\d-\d\d, letters: report\r?$/m);
    expect(letter.text).toContain('Measured: 2; secure 1, probable 1, ambiguous 0, none 0.');
    expect(letter.text).toContain('HC doubtful, probable: 718 s more, on 900 s');
    expect(letter.text).toContain(`/nights/${nightId}/report`);
    expect(await postReports(inMinutes(12))).toBe(0);
    // A letter that waits behind it has come: had the report been sent twice, it would be here by now.
    await inviteMember(curator, { programme, email: 'after@example.org', roles: ['observer'] });
    await letterTo('after@example.org');
    expect(catcher.caught.filter(({ to }) => to.includes(observer.email))).toHaveLength(1);
  });

  it('waits while the night lasts, and is not sent to someone who may no longer read it', async () => {
    const gone = await installation.makePerson('Gone Away', programme, ['observer']);
    const { nightId } = await seedNight(programme, gone.userId, [{ name: 'fine' }]);
    const date = (text: string) =>
      database().query(`UPDATE nights SET civil_date = ${text} WHERE id = :nightId`, { replacements: { nightId } });
    await date('UTC_DATE() + INTERVAL 1 DAY');
    expect(await postReports(inMinutes(11))).toBe(0);
    await date('UTC_DATE() - INTERVAL 3 DAY');
    await database().query('DELETE FROM programme_members WHERE user_id = :id', { replacements: { id: gone.userId } });
    expect(await postReports(inMinutes(11))).toBe(1);
    await until('the letter settled', async () => {
      const [row] = await database().query<{ state: string }>('SELECT state FROM letters WHERE night_id = :nightId', {
        replacements: { nightId },
        type: QueryTypes.SELECT,
      });
      return row.state === 'failed';
    });
    expect(catcher.caught.filter(({ to }) => to.includes(gone.email))).toEqual([]);
  });
});

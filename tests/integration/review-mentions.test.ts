import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { setMentionLetters } from '$lib/server/accounts/set-mention-letters';
import type { Actor } from '$lib/server/auth/permissions';
import { database } from '$lib/server/database/connection';
import { ProgrammeMember } from '$lib/server/database/queries/people';
import { sendLetter } from '$lib/server/mail/send-letter';
import { commentOn } from '$lib/server/review/comment-on';
import { composeDigest } from '$lib/server/review/compose-digest';
import { postDigests } from '$lib/server/review/post-digests';
import { readExchange } from '$lib/server/review/read-exchange';
import { finishMention, readForYou } from '$lib/server/review/read-for-you';
import { recordVerdict } from '$lib/server/review/record-verdict';
import { makeInstallation, type Installation } from './installation';
import { startMailCatcher, type MailCatcher } from './mail-catcher';
import { at, first, makeWorld } from './release-world';

let catcher: MailCatcher;
let installation: Installation;
let world: Awaited<ReturnType<typeof makeWorld>>;
let ines: Actor;
let koji: Actor;
let ids: string[];

beforeAll(async () => {
  catcher = await startMailCatcher();
  Object.assign(process.env, { SMTP_URL: catcher.url, MAIL_FROM: 'Farglow <farglow@observatory.example>' });
  installation = await makeInstallation();
});
afterAll(async () => {
  await installation.destroy();
  await catcher.close();
  delete process.env.SMTP_URL;
  delete process.env.MAIL_FROM;
});
beforeEach(async () => {
  catcher.caught.length = 0;
  world = await makeWorld(installation, [at(1), at(2)]);
  ({ scientist: ines, other: koji, ids } = world);
});

const NOON = new Date('2026-12-01T12:00:30Z');
const letterIds = async () =>
  (
    (await database().query("SELECT id FROM letters WHERE kind = 'mention digest' AND state = 'waiting' ORDER BY id", {
      type: 'SELECT',
    })) as { id: string }[]
  ).map(({ id }) => id);
/** As the worker's job does; again and again, since a job may come twice. */
async function sendAll(): Promise<void> {
  const compose = { 'mention digest': composeDigest } as never;
  for (const id of await letterIds()) for (let i = 0; i < 2; i++) await sendLetter(id, `mail-${id}`, compose);
}

describe('a mention', () => {
  it('is of members alone, and puts the comment on their list until they answer or are done with it', async () => {
    const { other: stranger } = await makeWorld(installation, [at(1)]);
    const { mentionable } = await readExchange(ines, ids[0]);
    expect(mentionable.map(({ name }) => name)).toContain(koji.name);
    expect(mentionable.map(({ id }) => id)).not.toContain(ines.userId);
    expect(JSON.stringify(mentionable)).not.toContain(stranger.name);
    await commentOn(ines, ids[0], `@${koji.name.toUpperCase()} and @${stranger.name}: is that sky? @${ines.name}`);
    await commentOn(ines, ids[1], `@${koji.name} this one too`);
    expect(await readForYou(stranger)).toEqual([]);
    expect(await readForYou(ines)).toEqual([]);
    expect((await readForYou(koji)).map(({ spectrumId, by, name }) => [spectrumId, by, name])).toEqual([
      [ids[1], ines.name, 'T-2'],
      [ids[0], ines.name, 'T-1'],
    ]);
    await commentOn(koji, ids[0], 'No, it is not.');
    const [left] = await readForYou(koji);
    expect(left.spectrumId).toBe(ids[1]);
    await finishMention(ines, left.commentId);
    expect(await readForYou(koji)).toHaveLength(1);
    await finishMention(koji, left.commentId);
    expect(await readForYou(koji)).toEqual([]);
    await expect(readForYou(null)).rejects.toMatchObject({ code: 'not-signed-in' });
  });

  it('tells nobody’s verdict, on the list or by letter', async () => {
    await recordVerdict(ines, ids[0], { ...first, comment: 'telling-verdict' });
    await commentOn(ines, ids[0], `@${koji.name} telling-comment: surely 0.3`);
    expect(JSON.stringify(await readForYou(koji))).not.toContain('telling');
    expect(await readExchange(koji, ids[0])).toMatchObject({ comments: [], hiddenComments: 1 });
    await postDigests(NOON);
    await sendAll();
    expect(catcher.caught).toHaveLength(1);
    expect(catcher.caught[0].raw).not.toMatch(/telling|surely|0\.3[^0-9]|secure/);
  });
});

describe('the daily letter', () => {
  it('comes once a day from noon UTC, about all that no letter told of, however often and by however many it is posted', async () => {
    await commentOn(ines, ids[0], `@${koji.name} look`);
    await commentOn(ines, ids[1], `@${koji.name} and here`);
    expect(await postDigests(new Date('2026-12-01T11:59:59Z'))).toBe(0);
    const posted = await Promise.all([1, 2, 3].map(() => postDigests(NOON)));
    expect(posted.reduce((sum, count) => sum + count, 0)).toBe(1);
    await sendAll();
    expect(catcher.caught.map(({ to }) => to)).toEqual([[koji.email]]);
    const { text, raw } = catcher.caught[0];
    expect(raw).toMatch(/^Subject: Mentioned in 2 comments in review\r?$/m);
    for (const id of ids) expect(text).toContain(`http://127.0.0.1:4399/review/${id}#comments`);
    await commentOn(ines, ids[0], `@${koji.name} once more`);
    expect(await postDigests(new Date('2026-12-01T23:00:00Z'))).toBe(0);
    expect(await postDigests(new Date('2026-12-02T12:00:00Z'))).toBe(1);
    await sendAll();
    expect(catcher.caught).toHaveLength(2);
    expect(catcher.caught[1].text).toContain('a comment');
    expect(await postDigests(new Date('2026-12-03T12:00:00Z'))).toBe(0);
  });

  it('does not come to whoever switched it off, has done with all, or left the programme', async () => {
    const mention = () => commentOn(ines, ids[0], `@${koji.name} look`);
    await setMentionLetters(koji, false);
    await mention();
    expect(await postDigests(NOON)).toBe(0);
    await setMentionLetters(koji, true);
    expect(await postDigests(NOON)).toBe(1);
    await setMentionLetters(koji, false);
    await sendAll();
    await setMentionLetters(koji, true);
    const { commentId } = await mention();
    expect(await postDigests(new Date('2026-12-02T12:00:00Z'))).toBe(1);
    await finishMention(koji, commentId);
    await finishMention(koji, (await readForYou(koji))[0].commentId);
    await sendAll();
    await mention();
    expect(await postDigests(new Date('2026-12-03T12:00:00Z'))).toBe(1);
    await ProgrammeMember.destroy({ where: { userId: koji.userId } });
    await sendAll();
    expect(catcher.caught).toEqual([]);
  });
});

import { execFileSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { copyFileSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import AxeBuilder from '@axe-core/playwright';
import { expect, test, type Page } from '@playwright/test';
import { readState } from './installation';
import { makeToken, signIn } from './people';

const SAMPLE = 'tests/fixtures/sample-night';
const spectra = readdirSync(SAMPLE).filter((name) => name.startsWith('hz_'));

let folder: string;
let token: string;
test.beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'farglow-folder-'));
  token = makeToken('Rua', 'read submit');
});
test.afterAll(() => rmSync(folder, { recursive: true, force: true }));

const ready = (page: Page) => page.locator('[data-ready]').waitFor({ state: 'attached' });
const api = (path: string) => `${readState().origin}/api/v1${path}`;

/** A new night of the demo programme, opened by the API. */
async function openNight(page: Page): Promise<string> {
  const headers = { authorization: `Bearer ${token}` };
  const answer = await page.request.post(api('/nights'), { headers, data: { civilDate: '2026-11-22' } });
  expect(answer.status()).toBe(201);
  return ((await answer.json()) as { id: string }).id;
}
async function visit(page: Page, night: string): Promise<void> {
  await page.goto(`${readState().origin}/nights/${night}`);
  await ready(page);
}
const drop = (page: Page, path: string) => page.getByLabel('Folder to add').setInputFiles(path);
const snapshot = async (page: Page, night: string) =>
  (await (
    await page.request.get(api(`/nights/${night}`), { headers: { authorization: `Bearer ${token}` } })
  ).json()) as {
    files: { total: number; read: number; failed: number };
    spectra: { total: number; measured: number };
    missing: { files: number };
    archives: { state: string; unpacked: { taken: number; already: number; refused: number } | null }[];
    problems: { code: string }[];
    done: boolean;
  };
const whenDone = (page: Page, night: string) =>
  expect.poll(async () => (await snapshot(page, night)).done, { timeout: 90_000, intervals: [500] }).toBe(true);
/** Limits what goes out, bytes a second; with 0 nothing goes. */
async function throttle(page: Page, bytesPerSecond: number): Promise<void> {
  const session = await page.context().newCDPSession(page);
  const limits = { offline: false, latency: 5, downloadThroughput: -1, uploadThroughput: bytesPerSecond };
  await session.send('Network.emulateNetworkConditions', limits);
}

test('the whole sample night is dropped as a folder, part of it there already: the rest goes up and all is read', async ({
  page,
}) => {
  const night = await openNight(page);
  const here = spectra.slice(0, 7);
  for (const name of here) {
    const file = { name, mimeType: 'application/octet-stream', buffer: readFileSync(join(SAMPLE, name)) };
    const headers = { authorization: `Bearer ${token}` };
    await page.request.post(api(`/nights/${night}/files`), { headers, multipart: { file } });
  }
  for (const name of spectra) copyFileSync(join(SAMPLE, name), join(folder, name));
  await signIn(page, 'Rua');
  await visit(page, night);
  const bodies: number[] = [];
  page.on('request', (request) => {
    if (request.url().endsWith('/files')) bodies.push(Number(request.headers()['content-length'] ?? 0));
  });
  await drop(page, folder);
  // Bytes of other nights of the programme count as there too; these seven do at least.
  await expect(page.getByText(/here already, skipped/)).toBeVisible();
  await expect(page.getByText(/^48 of 48 files sent/)).toBeVisible({ timeout: 60_000 });
  await whenDone(page, night);
  const end = await snapshot(page, night);
  expect(end.files).toMatchObject({ total: 48, read: 48, failed: 0 });
  expect(end.spectra).toMatchObject({ total: 48, measured: 48 });
  expect(end.missing.files).toBe(0);
  // Dropped once more, nothing goes up at all.
  await page.getByRole('button', { name: 'Close' }).click();
  const before = bodies.length;
  await drop(page, folder);
  await expect(page.getByText('48 here already, skipped')).toBeVisible();
  expect(bodies.length).toBe(before);
  expect((await snapshot(page, night)).files.total).toBe(48);
});

test('a page that is closed in the middle: the night says what is missing, and the same folder ends it without a duplicate', async ({
  page,
  context,
}) => {
  const night = await openNight(page);
  const big = mkdtempSync(join(tmpdir(), 'farglow-big-'));
  // New bytes, and an archive large enough to go up in chunks.
  const texts = spectra.filter((name) => name.endsWith('.csv'));
  const members = mkdtempSync(join(tmpdir(), 'farglow-members-'));
  for (let i = 0; i < 10; i++) {
    const text = Buffer.concat([readFileSync(join(SAMPLE, texts[i % texts.length])), Buffer.from('\n'.repeat(40 + i))]);
    writeFileSync(join(members, `member-${i}.csv`), text);
    writeFileSync(join(big, `single-${i}.csv`), Buffer.concat([text, Buffer.from('\n'.repeat(60))]));
  }
  writeFileSync(join(members, '.padding'), Buffer.alloc(9_000_000));
  execFileSync('tar', ['-cf', join(big, 'night.tar'), '-C', members, '.']);
  await signIn(page, 'Rua');
  await visit(page, night);
  await throttle(page, 2_500_000);
  let chunks = 0;
  page.on('response', (response) => {
    if (response.request().method() === 'PATCH' && response.ok()) chunks++;
  });
  await drop(page, big);
  await expect.poll(() => chunks, { timeout: 30_000, intervals: [20] }).toBeGreaterThan(0);
  await page.close();

  const again = await context.newPage();
  await visit(again, night);
  const notice = again.getByRole('group', { name: 'Files still missing' });
  await expect(notice).toContainText(/Half-submitted: \d+ files? \(.*\) announced by Rua/);
  await expect(notice).toContainText('night.tar');
  const { violations } = await new AxeBuilder({ page: again }).analyze();
  expect(violations.map(({ id, nodes }) => `${id}: ${nodes[0].html}`)).toEqual([]);
  const offsets: number[] = [];
  again.on('request', (request) => {
    if (request.method() === 'PATCH') offsets.push(Number(request.headers()['upload-offset']));
  });
  await drop(again, big);
  await expect(again.getByText(/^11 of 11 files sent/)).toBeVisible({ timeout: 60_000 });
  expect(offsets[0]).toBeGreaterThanOrEqual(4 * 1024 * 1024);
  await whenDone(again, night);
  const end = await snapshot(again, night);
  expect(end.files).toMatchObject({ total: 20, read: 20 });
  expect(end.archives).toMatchObject([{ state: 'done', unpacked: { taken: 10, refused: 0 } }]);
  expect(end.missing.files).toBe(0);
  await expect(notice).toBeHidden();
  rmSync(big, { recursive: true });
  rmSync(members, { recursive: true });
});

test('the README’s script sends an archive with a token, goes on after a break, and is told what is wrong', async ({
  page,
}) => {
  const night = await openNight(page);
  const place = mkdtempSync(join(tmpdir(), 'farglow-script-'));
  execFileSync('tar', ['-czf', join(place, 'night.tar.gz'), '-C', SAMPLE, ...spectra.slice(0, 12)]);
  const bytes = readFileSync(join(place, 'night.tar.gz'));
  const headers = { authorization: `Bearer ${token}` };
  const upload = `/nights/${night}/uploads`;

  // An earlier try that broke: its first bytes are here.
  const digest = createHash('sha256').update(bytes).digest('base64');
  const opened = await page.request.post(api(upload), {
    headers: {
      ...headers,
      'Upload-Complete': '?0',
      'Upload-Length': String(bytes.length),
      'Content-Disposition': 'attachment; filename="night.tar.gz"',
      'Repr-Digest': `sha-256=:${digest}:`,
    },
  });
  expect(opened.status()).toBe(201);
  const address = `${readState().origin}${opened.headers().location}`;
  const patch = (from: number, to: number, more = {}) => {
    const type = { 'Content-Type': 'application/partial-upload', 'Upload-Offset': String(from) };
    return page.request.patch(address, { headers: { ...headers, ...type, ...more }, data: bytes.subarray(from, to) });
  };
  const first = await patch(0, 100_000);
  expect([first.status(), first.headers()['upload-offset']]).toEqual([200, '100000']);
  const wrong = await patch(0, 100_000);
  expect([wrong.status(), wrong.headers()['upload-offset']]).toEqual([409, '100000']);
  expect(await wrong.json()).toMatchObject({ detail: expect.stringContaining('holds 100000 bytes') });
  expect((await patch(100_000, 100_001, { 'Content-Type': 'text/plain' })).status()).toBe(415);
  expect((await page.request.patch(address, { data: bytes, headers: {} })).status()).toBe(401);
  const stands = await page.request.head(address, { headers });
  expect([stands.status(), stands.headers()['upload-complete']]).toEqual([204, '?0']);

  const [, script] = /```sh\n(API=[^]*?)```/.exec(readFileSync('README.md', 'utf8'))!;
  const env = { ...process.env, TOKEN: token, NIGHT: night };
  const here = script.replace(/^API=\S+/, `API=${readState().origin}`);
  execFileSync('bash', ['-ec', here], { cwd: place, env, timeout: 60_000 });
  const done = await (await page.request.get(address, { headers })).json();
  expect(done).toMatchObject({ receivedBytes: bytes.length, sizeBytes: bytes.length });
  await whenDone(page, night);
  expect((await snapshot(page, night)).archives).toMatchObject([{ state: 'done', unpacked: { refused: 0 } }]);
  expect((await snapshot(page, night)).files).toMatchObject({ total: 12, read: 12 });
  rmSync(place, { recursive: true });
});

test('one file is taken back, then all: nothing is missing, and the rest goes when asked', async ({ page }) => {
  const night = await openNight(page);
  const fresh = mkdtempSync(join(tmpdir(), 'farglow-cancel-'));
  for (let i = 0; i < 60; i++) {
    const text = Buffer.concat([readFileSync(join(SAMPLE, 'hz_0015.csv')), Buffer.from('\n'.repeat(200 + i))]);
    writeFileSync(join(fresh, `file-${String(i).padStart(2, '0')}.csv`), text);
  }
  await signIn(page, 'Rua');
  await visit(page, night);
  await throttle(page, 300_000);
  await drop(page, fresh);
  await page
    .getByRole('button', { name: /^Cancel .*file-\d\d\.csv$/ })
    .first()
    .click();
  await page.getByRole('button', { name: 'Cancel all' }).click();
  const other = page.getByRole('button', { name: /^Send the other \d+/ });
  await expect(other).toBeVisible();
  await expect.poll(async () => (await snapshot(page, night)).missing.files).toBe(0);
  await throttle(page, -1);
  await other.click();
  await expect(page.getByText(/^60 of 60 files sent/)).toBeVisible({ timeout: 60_000 });
  expect((await snapshot(page, night)).files.total).toBe(60);
  rmSync(fresh, { recursive: true });
});

test('a zip with one bad member gives the others, and says what is wrong with it', async ({ page }) => {
  const night = await openNight(page);
  await signIn(page, 'Rua');
  await visit(page, night);
  await page.getByLabel('Files to add').setInputFiles('tests/fixtures/archives/one-bad.zip');
  await expect(page.getByText('climbs out of its folder')).toBeVisible({ timeout: 60_000 });
  await expect(page.getByRole('list', { name: 'Archives' })).toContainText(/one-bad\.zip\s+2\s+files taken, 1 refused/);
  await whenDone(page, night);
  const end = await snapshot(page, night);
  expect(end.files).toMatchObject({ total: 2, read: 2 });
  expect(end.problems.map(({ code }) => code)).toEqual(['archive-climbs']);
  const { violations } = await new AxeBuilder({ page }).analyze();
  expect(violations.map(({ id, nodes }) => `${id}: ${nodes[0].html}`)).toEqual([]);
});

import { readFileSync } from 'node:fs';
import { expect, test, type APIRequestContext } from '@playwright/test';
import { readState } from './installation';
import { makeToken } from './people';

const SAMPLE = 'tests/fixtures/sample-night';
let origin: string;
let token: string;
let api: (path: string) => string;
test.beforeAll(() => {
  ({ origin } = readState());
  token = makeToken('Rua', 'read submit');
  api = (path) => `${origin}/api/v1${path}`;
});
const bearer = () => ({ authorization: `Bearer ${token}` });

async function newNight(request: APIRequestContext): Promise<string> {
  const answer = await request.post(api('/nights'), { headers: bearer(), data: { civilDate: '2026-11-20' } });
  expect(answer.status()).toBe(201);
  const { id } = (await answer.json()) as { id: string };
  expect(answer.headers().location).toBe(`/api/v1/nights/${id}`);
  return id;
}

test('health says that every service answers', async ({ request }) => {
  const answer = await request.get(api('/health'));
  expect(answer.status()).toBe(200);
  expect(await answer.json()).toMatchObject({ ok: true });
});

test('a night is submitted and read with a token alone', async ({ request }) => {
  const night = await newNight(request);
  const name = 'hz_0015.csv';
  const buffer = readFileSync(`${SAMPLE}/${name}`);
  const upload = await request.post(api(`/nights/${night}/files`), {
    headers: bearer(),
    multipart: { file: { name, mimeType: 'text/csv', buffer } },
  });
  expect(upload.status()).toBe(202);
  expect(await upload.json()).toMatchObject({ files: [{ name, sizeBytes: buffer.length }], refused: [] });
  await expect
    .poll(async () => (await (await request.get(api(`/nights/${night}`), { headers: bearer() })).json()).done, {
      timeout: 30_000,
    })
    .toBe(true);
  const { rows } = await (await request.get(api(`/nights/${night}/measurements`), { headers: bearer() })).json();
  expect(rows).toHaveLength(1);
  expect(rows[0]).toMatchObject({ source: name, extension: 0, row: 1, state: 'measured' });
});

test('what is wrong at the door is a 4xx with problem details', async ({ request }) => {
  const night = await newNight(request);
  const files = api(`/nights/${night}/files`);
  const send = (name: string, buffer: Buffer) =>
    request.post(files, { headers: bearer(), multipart: { file: { name, mimeType: 'application/fits', buffer } } });
  const cases = [
    { answer: await request.get(api('/nights')), status: 401 },
    { answer: await request.get(api('/nights'), { headers: { authorization: 'Bearer fgt_wrong' } }), status: 401 },
    { answer: await request.get(api(`/nights/${crypto.randomUUID()}`), { headers: bearer() }), status: 404 },
    {
      answer: await request.post(api('/nights'), { headers: bearer(), data: { civilDate: '14.11.2026' } }),
      status: 422,
    },
    {
      answer: await request.post(api('/nights'), {
        headers: { ...bearer(), 'content-type': 'application/json' },
        data: Buffer.from('{'),
      }),
      status: 422,
    },
    { answer: await request.post(files, { headers: bearer(), data: { a: 1 } }), status: 415 },
    { answer: await send('empty.fits', Buffer.alloc(0)), status: 422 },
    { answer: await send('large.fits', Buffer.alloc(2 * 1024 * 1024 + 1)), status: 413 },
    {
      answer: await request.post(api('/nights'), { headers: bearer(), data: { civilDate: 'x'.repeat(2_000_000) } }),
      status: 413,
    },
  ];
  for (const { answer, status } of cases) {
    expect(answer.status()).toBe(status);
    expect(answer.headers()['content-type']).toContain('application/problem+json');
    const details = await answer.json();
    expect(details).toMatchObject({ status, title: expect.any(String), detail: expect.any(String) });
  }
  expect((await (await request.get(api(`/nights/${night}`), { headers: bearer() })).json()).files.total).toBe(0);
});

test('a refused part of an upload loses no other', async ({ request }) => {
  const night = await newNight(request);
  const form = new FormData();
  form.append('file', new File([], 'empty.fits'));
  form.append('file', new File([readFileSync(`${SAMPLE}/hz_0018.csv`)], 'hz_0018.csv'));
  const answer = await request.post(api(`/nights/${night}/files`), { headers: bearer(), multipart: form });
  expect(answer.status()).toBe(202);
  expect(await answer.json()).toMatchObject({ files: [{ name: 'hz_0018.csv' }], refused: [{ name: 'empty.fits' }] });
});

test('a write with a cookie from elsewhere is refused', async ({ request }) => {
  const answer = await request.post(`${origin}/sign-in`, {
    headers: { origin: 'https://elsewhere.example' },
    form: { email: 'a@b.example', password: 'x' },
  });
  expect(answer.status()).toBe(403);
});

test('answers carry the headers that keep other sites out', async ({ request }) => {
  const answer = await request.get(`${origin}/sign-in`);
  const policy = answer.headers()['content-security-policy'];
  for (const part of ["object-src 'none'", "base-uri 'none'", "frame-ancestors 'none'", 'nonce-'])
    expect(policy).toContain(part);
  expect(answer.headers()['x-content-type-options']).toBe('nosniff');
});

import { expect, test, type Page } from '@playwright/test';
import { readState } from './installation';
import { makeToken, signIn } from './people';

const ready = (page: Page) => page.locator('[data-ready]').waitFor({ state: 'attached' });
async function open(page: Page, path: string): Promise<void> {
  await page.goto(`${readState().origin}${path}`);
  await ready(page);
}

/** Sets how the demo programme reviews, as its curator. */
async function set(page: Page, hidden: string, planted: string): Promise<void> {
  await signIn(page, 'Maren');
  await open(page, '/review/settings');
  await page
    .getByLabel(/^Looks without the engine/)
    .first()
    .fill(hidden);
  await page
    .getByLabel(/^Planted spectra/)
    .first()
    .fill(planted);
  await page.getByRole('button', { name: 'Save' }).first().click();
  await expect(page.getByText('Saved. It holds for looks from now on.')).toBeVisible();
}

/** Id of the demo's main night and its rows, as the API gives them to Rua, who judges nothing. */
async function nightOfRua(
  page: Page,
): Promise<{ night: string; rows: { spectrum: string; redshift: number | null }[] }> {
  const { origin } = readState();
  const headers = { authorization: `Bearer ${makeToken('Rua', 'read')}` };
  const { nights } = await (await page.request.get(`${origin}/api/v1/nights`, { headers })).json();
  const { id: night } = nights.find(({ civilDate }: { civilDate: string }) => civilDate === '2026-09-14');
  const path = `${origin}/api/v1/nights/${night}/measurements?limit=1000`;
  const { rows } = await (await page.request.get(path, { headers })).json();
  return { night, rows };
}
const idIn = (href: string | null) => /[0-9a-f-]{36}/.exec(href ?? '')![0];
const idsShown = async (page: Page) =>
  Promise.all(
    (await page.getByRole('rowheader').getByRole('link').all()).map(async (link) =>
      idIn(await link.getAttribute('href')),
    ),
  );
/** All that pages and the API send whoever is signed in about a spectrum. */
async function sentOf(page: Page, spectrum: string, night: string): Promise<string> {
  const { origin } = readState();
  const ends = ['', '/__data.json', '/pixels', '/question'].map((end) => `/review/${spectrum}${end}`);
  const answers = await Promise.all(ends.map((path) => page.request.get(origin + path)));
  const texts = await Promise.all(answers.map(async (answer) => (await answer.body()).toString('latin1')));
  const rows = await page.request.get(`${origin}/api/v1/nights/${night}/measurements?limit=1000`);
  const row = (await rows.json()).rows.find((one: { spectrum: string }) => one.spectrum === spectrum);
  return [...texts, JSON.stringify(row ?? {})].join('\n');
}

test.afterAll(async ({ browser }) => {
  const page = await browser.newPage();
  await set(page, '0', '0');
  await page.close();
});

test('a hidden look sends nothing of the engine’s answer until the verdict', async ({ page }) => {
  await set(page, '50', '5');
  const { night, rows } = await nightOfRua(page);
  await signIn(page, 'Ines');
  await open(page, `/review?night=${night}`);
  const hiddenRows = page.getByRole('row').filter({ hasText: 'shows after your verdict' });
  const links = await hiddenRows.getByRole('link').all();
  expect(links.length).toBeGreaterThan(5);
  const ids = await Promise.all(links.map(async (link) => idIn(await link.getAttribute('href'))));
  const { spectrum, redshift } = rows.find((row) => ids.includes(row.spectrum) && row.redshift !== null)!;
  await open(page, `/review/${spectrum}?night=${night}`);
  await expect(page.getByRole('heading', { name: 'The engine’s answer is hidden' })).toBeVisible();
  const sent = await sentOf(page, spectrum, night);
  expect(sent).not.toContain(redshift!.toFixed(4).slice(0, -1));
  expect(sent).toContain('"answerHidden":true');
  const name = await page.getByRole('heading', { level: 1 }).innerText();
  await page.keyboard.press('x');
  await expect(page.getByText(`last: no redshift, ${name}`)).toBeVisible();
  await open(page, `/review/${spectrum}?night=${night}`);
  await expect(page.getByRole('heading', { name: 'The engine’s answer is hidden' })).toBeHidden();
  expect(await sentOf(page, spectrum, night)).toContain(redshift!.toFixed(4).slice(0, -1));
});

test('a mention is completed by keyboard, stands on its person’s list, and is taken off', async ({ page }) => {
  const { rows } = await nightOfRua(page);
  const { spectrum } = rows.at(-1)!;
  await signIn(page, 'Koji');
  await open(page, `/review/${spectrum}`);
  const field = page.getByRole('textbox', { name: 'New comment' });
  await field.focus();
  await page.keyboard.type('Is this sky, @va');
  await expect(page.getByRole('option', { name: 'Ines Vardal' })).toBeVisible();
  await page.keyboard.press('Enter');
  await expect(field).toHaveValue('Is this sky, @Ines Vardal ');
  await page.keyboard.type('?');
  await page.getByRole('button', { name: 'Comment', exact: true }).click();
  await expect(page.getByText('Is this sky, @Ines Vardal ?')).toBeVisible();
  await signIn(page, 'Ines');
  await open(page, '/review');
  const list = page.getByRole('region', { name: 'For you' });
  await expect(list.getByText('Koji Brandt')).toBeVisible();
  expect(await list.getByRole('link').first().getAttribute('href')).toBe(`/review/${spectrum}#comments`);
  await expect(list).not.toContainText('sky');
  await list.getByRole('button', { name: /^Done with the comment by Koji/ }).click();
  await expect(list).toBeHidden();
});

test('planted spectra are dealt, judged like any other, and named nowhere', async ({ page }) => {
  const { night, rows } = await nightOfRua(page);
  const real = new Set(rows.map(({ spectrum }) => spectrum));
  await signIn(page, 'Koji');
  let planted: string[] = [];
  // A worker plants at its next round, a minute at most, and measures.
  await expect(async () => {
    await open(page, `/review?night=${night}&show=all`);
    planted = (await idsShown(page)).filter((id) => !real.has(id));
    expect(planted.length).toBeGreaterThan(4);
  }).toPass({ timeout: 100_000, intervals: [3_000] });
  await open(page, `/review/${planted[0]}?night=${night}`);
  const name = await page.getByRole('heading', { level: 1 }).innerText();
  expect(name).toMatch(/^HC J\d{4}\.\d[−-]\d{4}$/);
  expect((await sentOf(page, planted[0], night)).toLowerCase()).not.toContain('plant');
  await page.keyboard.press('x');
  await expect(page.getByText(`last: no redshift, ${name}`)).toBeVisible();
  const again = await nightOfRua(page);
  expect(again.rows.map(({ spectrum }) => spectrum).filter((id) => !real.has(id))).toEqual([]);
  await open(page, '/review/statistics');
  await expect(page.getByText('Counted up to last midnight UTC').first()).toBeVisible();
});

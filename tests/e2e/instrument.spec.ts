import { readFileSync } from 'node:fs';
import AxeBuilder from '@axe-core/playwright';
import { expect, test, type APIRequestContext, type Page } from '@playwright/test';
import { readState } from './installation';
import { makeToken, signIn } from './people';

const ready = (page: Page) => page.locator('[data-ready]').waitFor({ state: 'attached' });
const open = async (page: Page, path: string) => {
  await page.goto(`${readState().origin}${path}`);
  await ready(page);
};

/** No axe violation and nothing wider than the screen, in every theme at both widths; the page is left as it was. */
async function expectAccessible(page: Page): Promise<void> {
  for (const theme of ['light', 'dark', 'dome']) {
    await page.context().addCookies([{ name: 'farglow-theme', value: theme, url: readState().origin }]);
    for (const width of [390, 1440]) {
      await page.setViewportSize({ width, height: 900 });
      await page.reload();
      await ready(page);
      const { violations } = await new AxeBuilder({ page }).analyze();
      expect(
        violations.map(({ id, nodes }) => `${id}: ${nodes[0].html}`),
        `${theme} at ${width}`,
      ).toEqual([]);
      const overflow = await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth);
      expect(overflow, `${theme} at ${width}`).toBeLessThanOrEqual(0);
    }
  }
}

/** The first columns of hz_0018.csv (wavelength in um, flux, error) under names that tell nothing. */
const odd = (copies: number) => {
  const text = readFileSync('tests/fixtures/sample-night/hz_0018.csv', 'utf8');
  const rows = text.split('\n').filter((line) => /^[\d.]/.test(line));
  return Buffer.from(['k1,k2,k3', ...rows, ''.padEnd(copies, '\n')].join('\n'));
};

async function submitOddFiles(request: APIRequestContext): Promise<string> {
  const { origin } = readState();
  const headers = { authorization: `Bearer ${makeToken('Rua', 'submit,read')}` };
  const made = await request.post(`${origin}/api/v1/nights`, { headers, data: { civilDate: '2026-09-21' } });
  const { id } = (await made.json()) as { id: string };
  for (const n of [1, 2]) {
    const file = { name: `odd-${n}.csv`, mimeType: 'text/csv', buffer: odd(n) };
    const sent = await request.post(`${origin}/api/v1/nights/${id}/files`, { headers, multipart: { file } });
    expect(sent.status()).toBe(202);
  }
  return id;
}

test('an observer says once what the columns of files are, and all of their kind are read', async ({
  page,
  request,
}) => {
  const night = await submitOddFiles(request);
  await signIn(page, 'Rua');
  await open(page, `/nights/${night}`);
  const problems = page.getByRole('region', { name: 'Problems' });
  await expect(problems.getByRole('link', { name: 'Say what its columns are' })).toHaveCount(2);
  await problems.getByRole('link', { name: 'Say what its columns are' }).first().click();
  await expect(page.getByRole('heading', { level: 1 })).toContainText('What are the columns of odd-');
  await expect(page.getByText('one more file of the same columns waits with it')).toBeVisible();
  const keep = page.getByRole('button', { name: 'Keep it and read 2 files' });
  await test.step('the page is for everyone', () => expectAccessible(page));

  await test.step('what is missing, and a unit that cannot be read, are said in words', async () => {
    await expect(page.getByText('Say which column is the flux.')).toBeVisible();
    await page.getByLabel('What k2 is').selectOption('flux');
    await expect(page.getByText('Say which column is the wavelength')).toBeVisible();
    await page.getByLabel('What k1 is').selectOption('wavelength');
    await page.getByLabel('Unit of wavelength').fill('furlong');
    await expect(page.getByText("'furlong' is not a unit of wavelength")).toBeVisible();
    await expect(keep).toBeDisabled();
  });

  await test.step('the plot shows the file as it would be read', async () => {
    await page.getByLabel('Unit of wavelength').fill('um');
    await page.getByLabel('What k3 is').selectOption('error');
    await page.getByLabel('Medium').selectOption('vacuum');
    const plot = page.getByRole('img', { name: /^Flux .* against wavelength from 5588\.5 to/ });
    await expect(plot).toBeVisible();
    await expect(page.getByText('its error dashed')).toBeVisible();
  });

  await test.step('kept once, both files are read and measured', async () => {
    await keep.click();
    await expect(page).toHaveURL(new RegExp(`/nights/${night}$`));
    await expect(page.getByText('No problems.')).toBeVisible({ timeout: 30_000 });
    const headers = { authorization: `Bearer ${makeToken('Rua', 'read')}` };
    const { origin } = readState();
    const told = (await (await request.get(`${origin}/api/v1/nights/${night}`, { headers })).json()) as {
      spectra: { total: number; measured: number };
    };
    expect(told.spectra).toMatchObject({ total: 2, measured: 2 });
  });
});

test('a changed instrument is measured again, compared, accepted in bulk and taken back', async ({ page }) => {
  await signIn(page, 'Rua');
  await open(page, '/instruments');
  await page.locator('tbody a').first().click();
  await ready(page);

  await test.step('what cannot be is said at its field; an unchanged description makes no version', async () => {
    await page.getByLabel('Bad regions').fill('6600 5000 backwards');
    await page.getByRole('button', { name: /^Save as version/ }).click();
    await expect(page.getByText('the range ends before it begins')).toBeVisible();
    await page.getByLabel('Bad regions').fill('');
    await page.getByRole('button', { name: /^Save as version/ }).click();
    await expect(page.getByText('Nothing was changed, so no version was made.')).toBeVisible();
  });

  await test.step('a change is a new version and offers a re-measure that counts its spectra', async () => {
    await page.getByLabel('Bad regions').fill('5000 6600 hot amplifier');
    await page.getByLabel('What changed').fill('The amplifier of the blue arm was hot');
    await page.getByRole('button', { name: /^Save as version/ }).click();
    await expect(page.getByText('The older ones stay readable below.')).toBeVisible();
    await expect(page.getByRole('heading', { name: /spectra stand by older versions$/ })).toBeVisible();
    await page.getByRole('button', { name: 'Measure again' }).click();
    await expect(page).toHaveURL(/\/review\/compare\/[0-9a-f-]+$/);
    await expect(page.getByText(/^Done\./)).toBeVisible({ timeout: 60_000 });
  });

  const address = new URL(page.url()).pathname;
  await test.step('what changed most stands first, and filters live in the address', async () => {
    const table = page.getByRole('region', { name: /^Spectra before and after/ });
    await expect(table.getByRole('row').nth(1)).toContainText(/other redshift|redshift lost/);
    await page.getByRole('link', { name: /^other word/ }).click();
    await expect(page).toHaveURL(/change=confidence/);
    await expect(table.getByRole('row').nth(1)).toContainText('other word');
    await expect(page.getByText('Scientists and curators of the programme accept them.')).toBeVisible();
    const first = table.getByRole('rowheader').first().getByRole('link');
    await expect(first).toHaveAttribute('href', /^\/review\/[0-9a-f-]+$/);
  });

  await test.step('a curator accepts what a filter takes, told the number first, and takes it back', async () => {
    await signIn(page, 'Maren');
    await open(page, `${address}?change=alike`);
    await expect(page.getByText(/^Would accept \d+ spectra/)).toBeVisible();
    const button = page.getByRole('button', { name: /^Accept \d+ spectra$/ });
    const said = (await button.innerText()).match(/\d+/)![0];
    await button.click();
    await expect(page.getByText(`${said} spectra accepted.`)).toBeVisible();
    await expect(page.getByText('Would accept 0 spectra')).toBeVisible();
    await page.getByRole('button', { name: /^Undo the acceptance/ }).click();
    await expect(page.getByText(`${said} spectra have their older measurement back.`)).toBeVisible();
    await expect(page.getByText(`Would accept ${said} spectra`)).toBeVisible();
  });

  await test.step('the comparison is for everyone', async () => {
    await open(page, `${address}?change=moved`);
    await expectAccessible(page);
  });

  await test.step('the description is put back, for what comes after', async () => {
    await open(page, '/instruments');
    await page.locator('tbody a').first().click();
    await ready(page);
    await page.getByLabel('Bad regions').fill('');
    await page.getByRole('button', { name: /^Save as version/ }).click();
    await expect(page.getByText('The older ones stay readable below.')).toBeVisible();
  });
});

import { readFileSync } from 'node:fs';
import { expect, test, type Page } from '@playwright/test';
import { readState } from './installation';
import { signIn } from './people';

const ready = (page: Page) => page.locator('[data-ready]').waitFor({ state: 'attached' });
async function open(page: Page, path: string): Promise<void> {
  await page.goto(`${readState().origin}${path}`);
  await ready(page);
}

test('a target list goes in, targets show their spectra across nights, and repeats judge the errors', async ({
  page,
}) => {
  const list = (text: string) => ({ name: 'targets.csv', mimeType: 'text/csv', buffer: Buffer.from(text) });

  await test.step('an observer hands in a list that is refused in words, then one of which all that is odd is said', async () => {
    await signIn(page, 'Rua');
    await open(page, '/programmes');
    await page
      .getByRole('navigation', { name: /^Targets of/ })
      .getByRole('link', { name: 'Targets' })
      .first()
      .click();
    await expect(page.getByRole('heading', { level: 1, name: 'Targets' })).toBeVisible();
    await ready(page);
    const chooser = page.getByLabel('A list, as CSV or VOTable');
    await chooser.setInputFiles(list('name,ra,dec\nE-1,4.2,-31\n'));
    await page.getByRole('button', { name: 'Take the list' }).click();
    await expect(page.getByText('Nothing tells whether "ra" is in degrees or in hours')).toBeVisible();
    await chooser.setInputFiles(
      list(
        'name,ra (h),dec,priority,r_mag\nE-1,04:12:00,-31:00:00,5,21.5\nE-2,63.2,-31,1,22\nE-1,04:12:00,-31:00:00,5,21.5\n',
      ),
    );
    await page.getByRole('button', { name: 'Take the list' }).click();
    const taken = page.locator('.taken');
    await expect(taken.getByText('targets.csv is taken.')).toBeVisible();
    await expect(taken.getByText('A right ascension of 63.2 is no hours.')).toBeVisible();
    await expect(taken.getByText(/Rows 1, 3 are one target/)).toBeVisible();
    await expect(taken.getByText(/1 that no spectrum shows yet: E-1/)).toBeVisible();
    await open(page, '/targets?search=e-1');
    await expect(page.getByRole('rowheader', { name: 'E-1' })).toBeVisible();
  });

  await test.step('swapped fibres are said on the target and on the night', async () => {
    await open(page, '/targets?only=doubts');
    await expect(page.locator('tbody tr')).toHaveCount(2);
    await page.locator('tbody th a').first().click();
    await expect(page.getByText(/so the two may be swapped/).first()).toBeVisible();
    await open(page, '/nights');
    await page.locator('a[href^="/nights/"]', { hasText: '2026-09-13' }).first().click();
    await ready(page);
    await expect(page.getByText(/from where the target list has it/).first()).toBeVisible();
  });

  await test.step('the spectra of a target are drawn over one another, and combined into one of their own', async () => {
    await signIn(page, 'Ines');
    await open(page, '/targets?only=repeats');
    await page.locator('tbody th a').first().click();
    await ready(page);
    await expect(page.getByRole('img', { name: /spectra over one another/ })).toBeVisible();
    await expect(page.locator('.thumb svg')).not.toHaveCount(0);
    const rows = page.getByRole('region', { name: /^Spectra of/ }).locator('tbody tr');
    const before = await rows.count();
    await page.getByRole('button', { name: 'Combine its spectra' }).click();
    await expect(page.getByText(/spectra are combined, weighted by inverse variance/)).toBeVisible();
    await expect(async () => {
      await page.reload();
      await expect(rows).toHaveCount(before + 1, { timeout: 1000 });
      await expect(rows.last()).toContainText('combination of', { timeout: 1000 });
      await expect(rows.last().getByRole('link').first()).toHaveAttribute('href', /\/review\//, { timeout: 1000 });
    }).toPass({ timeout: 30_000 });
    await ready(page);
    await page.getByRole('button', { name: 'Combine its spectra' }).click();
    await expect(page.getByText('These spectra are combined already.')).toBeVisible();
  });

  await test.step('repeats are judged by their pulls, and come as CSV', async () => {
    await signIn(page, 'Maren');
    await open(page, '/repeats');
    await expect(page.getByRole('img', { name: /pulls of repeats, robust width/ })).toBeVisible();
    const [download] = await Promise.all([
      page.waitForEvent('download'),
      page.getByRole('link', { name: 'CSV' }).click(),
    ]);
    const [head, ...rows] = readFileSync((await download.path())!, 'utf8')
      .trim()
      .split('\r\n');
    expect(head).toMatch(/^target,confidence,first_spectrum,.*,pull,is_other_answer$/);
    expect(rows.length).toBeGreaterThan(10);
  });

  await test.step('an observer chooses columns by keyboard; the choice is kept, and the CSV follows it', async () => {
    await signIn(page, 'Rua');
    await open(page, '/nights');
    await page.locator('a[href^="/nights/"]', { hasText: '2026-09-14' }).first().click();
    await ready(page);
    await expect(page.getByRole('columnheader', { name: /magnitude/ })).toHaveCount(0);
    await page.getByText('Columns', { exact: true }).focus();
    await page.keyboard.press('Enter');
    await page.getByLabel('magnitude (as listed)').focus();
    await page.keyboard.press('Space');
    await expect(page.getByRole('columnheader', { name: /magnitude/ })).toBeVisible();
    await page.keyboard.press('Escape');
    await expect(page.getByLabel('magnitude (as listed)')).toBeHidden();
    await page.reload();
    await ready(page);
    await expect(page.getByRole('columnheader', { name: /magnitude/ })).toBeVisible();
    const [download] = await Promise.all([
      page.waitForEvent('download'),
      page.getByRole('button', { name: 'Download CSV' }).click(),
    ]);
    const [head] = readFileSync((await download.path())!, 'utf8').split('\r\n');
    expect(head.split(',')).toEqual(expect.arrayContaining(['redshift', 'magnitude', 'magnitude_band']));
    expect(head).not.toContain('exposure_s');
    await expect(page.getByRole('img', { name: /signal-to-noise a pixel against magnitude/ })).toBeVisible();
    await expect(page.getByRole('img', { name: /over the errors their files give/ })).toBeVisible();
  });
});

import { readFileSync } from 'node:fs';
import { expect, test, type Page } from '@playwright/test';
import { readState } from './installation';
import { signIn } from './people';

const SAMPLE = 'tests/fixtures/sample-night';
/** Strong spectra of six flavours, and one file that is none. */
const FILES = ['hz_0003.fits', 'hz_0015.csv', 'hz_0018.csv', 'hz_0005.dat', 'hz_0036.fits.gz', 'hz_0037.ecsv'];

const ready = (page: Page) => page.locator('[data-ready]').waitFor({ state: 'attached' });

test('a night goes in, redshifts come out, a catalogue answers', async ({ page }) => {
  const { origin } = readState();

  await test.step('an observer opens a night, drops files and watches them being measured', async () => {
    await signIn(page, 'Rua');
    await page.goto(`${origin}/nights?new`);
    await ready(page);
    await page.getByLabel('Civil date').fill('2026-11-21');
    await page.getByRole('button', { name: 'Open the night' }).click();
    await expect(page).toHaveURL(/\/nights\/[0-9a-f-]{36}$/);
    await ready(page);
    await page
      .getByLabel('Files to add')
      .setInputFiles([
        ...FILES.map((name) => ({
          name,
          mimeType: 'application/octet-stream',
          buffer: readFileSync(`${SAMPLE}/${name}`),
        })),
        { name: 'not-a-spectrum.fits', mimeType: 'application/fits', buffer: Buffer.from('a sentence, no spectrum') },
      ]);
    await expect(page.getByText('Nothing waits: 6 of 6 spectra measured, 1 problem')).toBeAttached({ timeout: 60_000 });
    await expect(page.getByText('not-a-spectrum.fits').first()).toBeVisible();
    await expect(page.getByRole('link', { name: 'HZ-0003' })).toBeVisible();
  });
});

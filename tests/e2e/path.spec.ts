import { readFileSync } from 'node:fs';
import { expect, test, type Page } from '@playwright/test';
import { readState } from './installation';
import { signIn } from './people';

const SAMPLE = 'tests/fixtures/sample-night';
/** Strong spectra of six flavours. */
const FILES = ['hz_0004.fits.gz', 'hz_0018.csv', 'hz_0022.fits', 'hz_0038.fits.gz', 'hz_0039.fits', 'hz_0047.dat'];

/** Position and redshift of a file's object, from the simulator's own list. */
function truthOf(file: string): { redshift: number } {
  const rows = readFileSync(`${SAMPLE}/truth.csv`, 'utf8').split('\n');
  const column = rows[0].split(',').indexOf('z');
  return { redshift: Number(rows.find((row) => row.startsWith(`${file},`))!.split(',')[column]) };
}

const ready = (page: Page) => page.locator('[data-ready]').waitFor({ state: 'attached' });

test('a night goes in, redshifts come out, a catalogue answers', async ({ page, request }) => {
  test.setTimeout(300_000);
  const { origin } = readState();
  let night = '';
  let release = '';

  await test.step('an observer opens a night, drops files and watches them being measured', async () => {
    await signIn(page, 'Rua');
    await page.goto(`${origin}/nights?new`);
    await ready(page);
    await page.getByLabel('Civil date').fill('2026-11-21');
    await page.getByRole('button', { name: 'Open the night' }).click();
    await expect(page).toHaveURL(/\/nights\/[0-9a-f-]{36}$/);
    night = page.url().split('/').pop()!;
    await ready(page);
    // A real drop: a DataTransfer with files, as the browser would hand it over.
    const files = [
      ...FILES.map((name) => ({ name, base64: readFileSync(`${SAMPLE}/${name}`).toString('base64') })),
      { name: 'not-a-spectrum.fits', base64: Buffer.from('a sentence, no spectrum').toString('base64') },
    ];
    const transfer = await page.evaluateHandle((list) => {
      const data = new DataTransfer();
      for (const { name, base64 } of list) {
        data.items.add(new File([Uint8Array.from(atob(base64), (c) => c.charCodeAt(0))], name));
      }
      return data;
    }, files);
    const target = page.locator('main');
    for (const type of ['dragenter', 'dragover', 'drop']) await target.dispatchEvent(type, { dataTransfer: transfer });
    await expect(page.getByText('Nothing waits: 6 of 6 spectra measured, 1 problem')).toBeAttached({ timeout: 90_000 });
    await expect(page.getByText('The file is not FITS')).toBeVisible();
    await expect(page.getByRole('link', { name: 'HZ-0022' })).toBeVisible();
  });

  await test.step('a scientist gives verdicts by keyboard and undoes one', async () => {
    await signIn(page, 'Ines');
    await page.goto(`${origin}/review?night=${night}`);
    await ready(page);
    await page.getByRole('link', { name: /^Start with/ }).click();
    await expect(page).toHaveURL(/\/review\/[0-9a-f-]{36}\?night=/);
    for (let i = 0; i < FILES.length; i++) {
      const name = await page.getByRole('heading', { level: 1 }).innerText();
      const secure = page.getByRole('radio', { name: 'secure', exact: false });
      await expect(secure).not.toBeChecked();
      await page.keyboard.press('s');
      await expect(secure).toBeChecked();
      await page.keyboard.press('Enter');
      if (i < FILES.length - 1) await expect(page.getByRole('heading', { level: 1 })).not.toHaveText(name);
    }
    await expect(async () => {
      await page.goto(`${origin}/review?night=${night}`);
      await expect(page.getByText('All looked at.')).toBeVisible({ timeout: 1_000 });
    }).toPass({ timeout: 20_000 });
    await page.goto(`${origin}/review?night=${night}&show=all`);
    await ready(page);
    await page.getByRole('rowheader').getByRole('link').first().click();
    await expect(page.getByRole('button', { name: /^Undo/ })).toBeEnabled();
    await page.keyboard.press('u');
    await expect(async () => {
      await page.goto(`${origin}/review?night=${night}`);
      await expect(page.getByText('1 of 6 spectra wait for your look')).toBeVisible({ timeout: 1_000 });
    }).toPass({ timeout: 20_000 });
  });

  await test.step('a curator drafts, another signs and freezes', async () => {
    await signIn(page, 'Maren');
    await page.goto(`${origin}/drafts`);
    await ready(page);
    await page.getByText('New draft').click();
    await page.getByRole('button', { name: 'Make the draft' }).click();
    await expect(page).toHaveURL(/\/drafts\/halloran-lines\/[0-9a-f-]{36}$/);
    await ready(page);
    // The demo leaves a question open, which stands against signing until its target is left out.
    await page
      .getByRole('button', { name: /^Leave .* out$/ })
      .first()
      .click();
    await expect(page.getByText('nothing stands against signing')).toBeVisible();
    const draft = page.url();
    await expect(page.getByRole('button', { name: 'Sign and freeze' })).toBeDisabled();
    await signIn(page, 'Felix');
    await page.goto(draft);
    await ready(page);
    await page.getByRole('checkbox', { name: /have looked at these rows/ }).check();
    await page.getByRole('button', { name: 'Sign and freeze' }).click();
    await expect(page).toHaveURL(/\/catalogues\/halloran-lines/);
    release = '2';
  });

  await test.step('nobody at all asks for a cone and sees the rows', async () => {
    await page.context().clearCookies();
    await page.goto(`${origin}/catalogues/halloran-lines/releases/${release}`);
    await ready(page);
    await page.getByRole('textbox', { name: 'RA (deg)' }).fill('328.47961');
    await page.getByRole('textbox', { name: 'Dec (deg)' }).fill('-26.28309');
    await page.getByRole('textbox', { name: 'radius (deg)' }).fill('0.01');
    await page.getByRole('button', { name: 'Run query' }).click();
    await expect(page.getByRole('rowheader', { name: 'HZ-0022' })).toBeVisible();

    const rows = `${origin}/api/v1/catalogues/halloran-lines/releases/${release}/rows`;
    const answer = await request.get(`${rows}?ra=328.47961&dec=-26.28309&radius=0.01`);
    const found = (await answer.json()).rows as { target: string; redshift: number }[];
    expect(found.map(({ target }) => target)).toEqual(['HZ-0022']);
    expect(Math.abs(found[0].redshift - truthOf('hz_0022.fits').redshift)).toBeLessThan(0.0005 * 1.56);
    const csv = await (await request.get(`${rows}?format=csv&redshift_min=0.55&redshift_max=0.56`)).text();
    expect(csv).toContain('HZ-0022');
    const cone = await request.get(`${origin}/vo/halloran-lines/cone?RA=328.47961&DEC=-26.28309&SR=0.01`);
    expect(cone.headers()['content-type']).toMatch(/xml/);
    expect(await cone.text()).toContain('HZ-0022');
  });
});

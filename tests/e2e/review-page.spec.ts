import AxeBuilder from '@axe-core/playwright';
import { expect, test, type Page } from '@playwright/test';
import { readState } from './installation';
import { signIn } from './people';

const ready = (page: Page) => page.locator('[data-ready]').waitFor({ state: 'attached' });
const plot = (page: Page) => page.getByRole('application', { name: /^Spectrum plot/ });
/** What a screen reader was told last. */
const status = (page: Page, text: RegExp) => page.locator('[aria-live="polite"]').filter({ hasText: text });

/** Opens the last secure spectrum of the queue, of whoever is signed in, and waits for its pixels. */
async function openSecure(page: Page, fromEnd = 1): Promise<string> {
  const { origin } = readState();
  await page.goto(`${origin}/review?confidence=secure&show=all`);
  await ready(page);
  const links = page.getByRole('rowheader').getByRole('link');
  const href = (await links.nth((await links.count()) - fromEnd).getAttribute('href'))!;
  await page.goto(`${origin}${href}`);
  await ready(page);
  await plot(page).waitFor();
  return /[0-9a-f-]{36}/.exec(href)![0];
}

/** Signal-to-noise of the strongest rung of the ladder, as it is written. */
const figures = (page: Page) =>
  page
    .locator('[data-rung]')
    .evaluateAll((rungs) => rungs.map((rung) => Number(/S\/N ([\d.]+)/.exec(rung.getAttribute('aria-label')!)?.[1])));

/** A key pressed before the dialog is gone belongs to the dialog. */
async function closeDialog(page: Page): Promise<void> {
  await page.keyboard.press('Escape');
  await expect(page.locator('dialog[open]')).toHaveCount(0);
  await expect(page.locator('dialog :focus')).toHaveCount(0);
}

async function noViolations(page: Page, what: string): Promise<void> {
  const { violations } = await new AxeBuilder({ page }).analyze();
  expect(
    violations.map(({ id, nodes }) => `${id}: ${nodes[0].html}`),
    what,
  ).toEqual([]);
}

test('masks by brush and by numbers are fitted around, undone, stored with the verdict and there again', async ({
  page,
}) => {
  await signIn(page, 'Felix');
  const id = await openSecure(page);
  const before = await figures(page);
  const strongest = Math.max(...before);
  let masked = { from: 0, to: 0, reason: '' };
  const rowOf = ({ from, to, reason }: typeof masked) => `${from.toFixed(1)} ${to.toFixed(1)} ${reason}`;

  await test.step('the brush leaves out what is dragged over, and the lines under it are measured no more', async () => {
    await page.locator('[data-rung]').nth(before.indexOf(strongest)).click();
    await page.keyboard.press('b');
    await expect(page.getByText('Drag over what to leave out')).toBeVisible();
    const box = (await plot(page).boundingBox())!;
    const middle = { x: box.x + 52 + (box.width - 60) / 2, y: box.y + box.height / 2 };
    await page.mouse.move(middle.x - 60, middle.y);
    await page.mouse.down();
    await page.mouse.move(middle.x + 60, middle.y, { steps: 4 });
    await page.mouse.up();
    await expect(status(page, /^Masked .* sky residual/)).toBeAttached();
    await expect(async () => expect((await figures(page))[before.indexOf(strongest)]).not.toBe(strongest)).toPass();
  });

  await test.step('undo brings the line back', async () => {
    await page.keyboard.press('j');
    await expect(async () => expect(await figures(page)).toEqual(before)).toPass();
  });

  await test.step('numbers and a reason do the same without a pointer; nonsense is said', async () => {
    await page.keyboard.press('b');
    await page.keyboard.press('k');
    const dialog = page.getByRole('dialog', { name: /^Masks/ });
    await dialog.getByLabel('from, Å').fill('200');
    await dialog.getByLabel('to, Å').fill('100');
    await dialog.getByRole('button', { name: 'Mask it' }).click();
    const fault = dialog.getByText(/^Give two wavelengths between/);
    await expect(fault).toBeVisible();
    // Inside what this spectrum covers, whichever it is.
    const shortest = Number(/between ([\d.]+)/.exec((await fault.textContent())!)![1]);
    masked = { from: shortest + 100, to: shortest + 112.5, reason: 'cosmic ray' };
    await dialog.getByLabel('from, Å').fill(`${masked.from}`);
    await dialog.getByLabel('to, Å').fill(`${masked.to}`);
    await dialog.getByLabel('because of').selectOption('cosmic ray');
    await dialog.getByRole('button', { name: 'Mask it' }).click();
    await expect(dialog.getByRole('row', { name: rowOf(masked) })).toBeVisible();
    await closeDialog(page);
  });

  await test.step('a second redshift is kept while the first is settled', async () => {
    await page.keyboard.press('ArrowDown');
    await page.keyboard.press('d');
    await expect(page.getByText(/^second:/)).toBeVisible();
    await page.keyboard.press('ArrowUp');
    await page.keyboard.press('p');
    const sent = page.waitForRequest((request) => request.url().includes('/verdict'));
    await page.keyboard.press('Enter');
    const fields = new URLSearchParams((await sent).postData()!);
    expect(JSON.parse(fields.get('masks')!)).toEqual([masked]);
    expect(Number(fields.get('secondRedshift'))).toBeGreaterThan(-0.003);
  });

  await test.step('and all of it is there when the spectrum is looked at again', async () => {
    await expect(page.getByText(/^last: .*probable/)).toBeVisible();
    await page.goto(`${readState().origin}/review/${id}`);
    await ready(page);
    await expect(page.getByText(/^Your verdict: .*probable and/)).toBeVisible();
    await page.keyboard.press('k');
    await expect(page.getByRole('row', { name: rowOf(masked) })).toBeVisible();
    await closeDialog(page);
    await page.locator('button[form="undo-verdict"]').click();
    await expect(page.getByText(/^Your verdict/)).toHaveCount(0);
  });
});

test('scales, residuals, frame and smoothing follow keys and fields, without an axe violation in any theme', async ({
  page,
}) => {
  await signIn(page, 'Felix');
  await openSecure(page, 2);
  await page.keyboard.press('r');
  await expect(page.getByText('residual: (flux − model) / error')).toBeVisible();
  await page.keyboard.press('m');
  await expect(page.getByText('smoothed by 1.5 px')).toBeVisible();
  await page.keyboard.press('w');
  const dialog = page.getByRole('dialog', { name: /^What the spectrum plot shows/ });
  await dialog.getByLabel('from', { exact: true }).fill('2');
  await dialog.getByLabel('to', { exact: true }).fill('1');
  await dialog.getByLabel('to', { exact: true }).blur();
  await expect(dialog.getByText(/^Give two numbers/)).toBeVisible();
  await dialog.getByLabel('from', { exact: true }).fill('0');
  await dialog.getByLabel('from', { exact: true }).blur();
  await expect(dialog.getByText(/^Give two numbers/)).toHaveCount(0);
  await dialog.getByLabel(/wavelengths as the observatory/).check();
  await dialog.getByRole('button', { name: 'Close' }).click();
  await expect(page.getByText(/at the observatory \(Å\)/)).toBeVisible();
  await page.keyboard.press('b');
  for (const theme of ['light', 'dark', 'dome']) {
    await page.evaluate((name) => (document.documentElement.dataset.theme = name), theme);
    await noViolations(page, `brush and residuals in ${theme}`);
    for (const key of theme === 'light' ? ['k', 'w', 'l'] : ['k', 'w']) {
      await page.keyboard.press(key);
      await expect(page.locator('dialog[open]')).toBeVisible();
      await noViolations(page, `dialog of ${key} in ${theme}`);
      await closeDialog(page);
    }
  }
});

test('every plot says in words what it shows, and a verdict is announced', async ({ page }) => {
  await signIn(page, 'Felix');
  await openSecure(page, 3);
  await expect(plot(page)).toHaveAccessibleDescription(
    /^Redshift \d\.\d{5}\. Lines seen at signal-to-noise 3 or more: /,
  );
  await expect(page.getByRole('group', { name: 'Lines on one velocity axis' })).toHaveAccessibleDescription(
    /lines in range.*Seen: /,
  );
  await expect(page.getByRole('group', { name: /^Hydrogen transitions/ })).toHaveAccessibleDescription(/hydrogen/i);
  await page.keyboard.press('l');
  await expect(page.getByRole('table', { name: /^Lines expected at redshift/ })).toBeVisible();
  await page.keyboard.press('Escape');
  await page.keyboard.press('x');
  await expect(status(page, /^no redshift, .*(Next spectrum|last of this queue)/)).toBeAttached();
  await expect(page.getByText(/^last: no redshift/)).toBeVisible();
  await page.keyboard.press('u');
  await expect(status(page, /^The last verdict is taken back/)).toBeAttached();
});

test('a quick yes works at 390 px by touch, with nothing wider than the screen', async ({ browser }) => {
  const context = await browser.newContext({ viewport: { width: 390, height: 844 }, hasTouch: true, isMobile: true });
  const page = await context.newPage();
  await signIn(page, 'Felix');
  await openSecure(page, 4);
  for (const button of await page.locator('#verdict .row button:visible, #verdict .row label:visible').all()) {
    const box = (await button.boundingBox())!;
    expect(box.x + box.width).toBeLessThanOrEqual(390);
    expect(box.height).toBeGreaterThanOrEqual(42);
  }
  const name = await page.getByRole('heading', { level: 1 }).innerText();
  await page.locator('#verdict').getByText('secure').tap();
  await page.getByRole('button', { name: /^Accept/ }).tap();
  await expect(page.getByText(new RegExp(`^last: .*secure, ${name}$`))).toBeVisible();
  await page.getByRole('button', { name: 'Flags, comment, undo' }).tap();
  await page.getByRole('button', { name: /^Undo/ }).tap();
  await expect(page.getByText(new RegExp(`^last: .*secure, ${name}$`))).toHaveCount(0);
  await context.close();
});

import { expect, test, type Page } from '@playwright/test';
import { readState } from './installation';
import { signIn } from './people';

const ready = (page: Page) => page.locator('[data-ready]').waitFor({ state: 'attached' });

test('a curator invites someone, who makes an account, a token for a script, and revokes it', async ({
  page,
  request,
}) => {
  const { origin } = readState();
  // Each run invites someone else, so that it can be repeated on one installation.
  const email = `tova.${Date.now()}@cape-halloran.example`;
  let link = '';

  await test.step('the curator gets a link to hand over, since this installation sends no mail', async () => {
    await signIn(page, 'Maren');
    await page.goto(`${origin}/programmes`);
    await ready(page);
    await page.getByLabel('E-mail').fill(email);
    await page.getByRole('button', { name: 'Invite', exact: true }).click();
    await expect(page.getByText('Choose at least one role.')).toBeVisible();
    await page.getByRole('checkbox', { name: 'observer' }).check();
    await page.getByRole('button', { name: 'Invite', exact: true }).click();
    await expect(page.getByText(`Hand this link to ${email}`)).toBeVisible();
    link = await page.locator('code').innerText();
    await expect(page.getByRole('rowheader', { name: email })).toBeVisible();
  });

  await test.step('the one invited makes an account with it', async () => {
    await page.context().clearCookies();
    await page.goto(link);
    await ready(page);
    await expect(page.getByRole('heading', { level: 1 })).toHaveText('Emission lines at Cape Halloran');
    await page.getByLabel('Name').fill('Tova Rask');
    await page.getByLabel('Password').fill('three quiet ospreys');
    await page.getByRole('button', { name: 'Make the account' }).click();
    await expect(page.getByRole('link', { name: 'Account: Tova Rask, observer' })).toBeVisible();
    await page.goto(link);
    await expect(page.getByText('This link was used already')).toBeVisible();
  });

  await test.step('a token is shown once, works with its scope, and not once it is revoked', async () => {
    await page.goto(`${origin}/account`);
    await ready(page);
    await page.getByLabel('For').fill('night script');
    await page.getByRole('button', { name: 'Make a token' }).click();
    const token = await page.locator('code').innerText();
    const headers = { authorization: `Bearer ${token}` };
    expect((await request.get(`${origin}/api/v1/nights`, { headers })).status()).toBe(200);
    await page.reload();
    await ready(page);
    await expect(page.getByText(token)).toHaveCount(0);
    await page.getByRole('button', { name: 'Revoke the token night script' }).click();
    await expect(page.getByText('The token is revoked.')).toBeVisible();
    expect((await request.get(`${origin}/api/v1/nights`, { headers })).status()).toBe(401);
  });

  await test.step('the password changes, and the old one opens nothing', async () => {
    await page.getByLabel('Present password').fill('not the present one');
    await page.getByLabel('New password').fill('four quiet ospreys');
    await page.getByRole('button', { name: 'Change the password' }).click();
    await expect(page.getByText('This is not your present password.')).toBeVisible();
    await page.getByLabel('Present password').fill('three quiet ospreys');
    await page.getByLabel('New password').fill('four quiet ospreys');
    await page.getByRole('button', { name: 'Change the password' }).click();
    await expect(page.getByText('Your password is changed')).toBeVisible();
  });
});

test('an observer reads the report of a night and takes what to point at again as CSV', async ({ page }) => {
  const { origin } = readState();
  await signIn(page, 'Rua');
  await page.goto(`${origin}/nights`);
  const href = await page.locator('a[href^="/nights/"]').first().getAttribute('href');
  await page.goto(`${origin}${href}`);
  await ready(page);
  await page.getByRole('link', { name: 'Night report' }).click();
  await expect(page.getByRole('heading', { level: 1, name: /^Report of the night/ })).toBeVisible();
  const rows = page.getByRole('region', { name: /^Targets to point at again/ }).getByRole('row');
  const download = page.waitForEvent('download');
  await page.getByRole('link', { name: 'CSV' }).click();
  const stream = await (await download).createReadStream();
  const parts: Buffer[] = [];
  for await (const part of stream) parts.push(part as Buffer);
  const lines = Buffer.concat(parts).toString('utf8').trimEnd().split('\r\n');
  expect(lines[0]).toMatch(/^place,name,ra_deg,dec_deg,/);
  expect(lines.length).toBe(await rows.count());
  await expect(rows.nth(1).getByRole('rowheader')).toContainText(lines[1].split(',')[1].replace(/^'/, ''));
});

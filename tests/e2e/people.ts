import { execFileSync } from 'node:child_process';
import { expect, type Page } from '@playwright/test';
import { readState } from './installation';

/** Signs a demo person in by the form, whoever was before. */
export async function signIn(page: Page, firstName: string): Promise<void> {
  const { origin, accounts } = readState();
  const { email, password } = accounts.find((account) => account.name.startsWith(firstName))!;
  await page.context().clearCookies();
  await page.goto(`${origin}/sign-in`);
  await page.locator('[data-ready]').waitFor({ state: 'attached' });
  await page.getByLabel('E-mail').fill(email);
  await page.getByLabel('Password').fill(password);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await expect(page).not.toHaveURL(/sign-in/);
}

/** A bearer token for a demo person, by the command of the README. */
export function makeToken(firstName: string, scope: string): string {
  const { data, accounts } = readState();
  const { email } = accounts.find((account) => account.name.startsWith(firstName))!;
  const args = ['run', '--silent', 'token', '--', '--email', email, '--scope', scope];
  return execFileSync('npm', args, { env: { ...process.env, DATA: data }, encoding: 'utf8' }).trim();
}

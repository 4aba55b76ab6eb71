import AxeBuilder from '@axe-core/playwright';
import { expect, test, type Page } from '@playwright/test';
import { readState } from './installation';
import { signIn } from './people';

const THEMES = ['light', 'dark', 'dome'];
const WIDTHS = [1440, 390];

/** Pages by whoever sees them; `first` follows the first link of that kind, `then` goes on from there. */
const PAGES: { name: string; who: string | null; path: string; first?: string; then?: string }[] = [
  { name: 'landing', who: null, path: '/' },
  { name: 'sign-in', who: null, path: '/sign-in' },
  { name: 'catalogues', who: null, path: '/catalogues' },
  { name: 'catalogue', who: null, path: '/catalogues/halloran-lines' },
  { name: 'nights', who: 'Rua', path: '/nights' },
  { name: 'night', who: 'Rua', path: '/nights', first: 'a[href^="/nights/"]' },
  { name: 'night report', who: 'Rua', path: '/nights', first: 'a[href^="/nights/"]', then: '/report' },
  { name: 'instruments', who: 'Rua', path: '/instruments' },
  { name: 'instrument', who: 'Rua', path: '/instruments', first: 'tbody a[href^="/instruments/"]' },
  { name: 'new instrument', who: 'Rua', path: '/instruments/new' },
  { name: 'before and after', who: 'Maren', path: '/review/compare' },
  { name: 'review list', who: 'Ines', path: '/review' },
  { name: 'review', who: 'Ines', path: '/review', first: 'a[href^="/review/"]' },
  { name: 'open questions', who: 'Felix', path: '/review?show=open' },
  { name: 'review statistics', who: 'Maren', path: '/review/statistics' },
  { name: 'how a programme reviews', who: 'Maren', path: '/review/settings' },
  { name: 'targets', who: 'Rua', path: '/targets' },
  { name: 'target', who: 'Ines', path: '/targets?only=repeats', first: 'a[href^="/targets/"]' },
  { name: 'repeats', who: 'Maren', path: '/repeats' },
  { name: 'programmes', who: 'Maren', path: '/programmes' },
  { name: 'account', who: 'Ines', path: '/account' },
  { name: 'drafts', who: 'Maren', path: '/drafts' },
];

async function settle(page: Page, first?: string, then = ''): Promise<void> {
  await page.locator('[data-ready]').waitFor({ state: 'attached' });
  if (!first) return;
  const href = await page.locator(first).first().getAttribute('href');
  await page.goto(`${readState().origin}${href}${then}`);
  await page.locator('[data-ready]').waitFor({ state: 'attached' });
  await page.waitForLoadState('networkidle').catch(() => {});
}

for (const { name, who, path, first, then } of PAGES) {
  test(`${name}: no axe violation in any theme or width, nothing wider than the screen, no fault in the console`, async ({
    page,
  }) => {
    const { origin } = readState();
    const faults: string[] = [];
    page.on('pageerror', (error) => faults.push(error.message));
    page.on('console', (message) => message.type() === 'error' && faults.push(message.text()));
    if (who) await signIn(page, who);
    for (const theme of THEMES) {
      await page.context().addCookies([{ name: 'farglow-theme', value: theme, url: origin }]);
      for (const width of WIDTHS) {
        await page.setViewportSize({ width, height: 900 });
        await page.goto(`${origin}${path}`);
        await settle(page, first, then);
        const { violations } = await new AxeBuilder({ page }).analyze();
        expect(
          violations.map(({ id, nodes }) => `${id}: ${nodes[0].html}`),
          `${name} in ${theme} at ${width}`,
        ).toEqual([]);
        const overflow = await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth);
        expect(overflow, `${name} in ${theme} at ${width}`).toBeLessThanOrEqual(0);
      }
    }
    expect(faults).toEqual([]);
  });
}

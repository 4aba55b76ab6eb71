import { cpus, loadavg } from 'node:os';
import { layOutTable, short } from './print-table';
import { processorTimeOf, timeDrag, timeNext, timeRedraws, watchDrawing } from './review-browser';
import { startInstallation, submitNight } from './review-installation';
import { REVIEW_PIXELS, reviewFiles } from './review-spectra';

export interface ReviewOptions {
  count: number;
  seed: number;
}

const quantile = (sorted: readonly number[], share: number) =>
  sorted[Math.min(sorted.length - 1, Math.ceil(share * sorted.length) - 1)];

function row(name: string, times: readonly number[], goal: number | null): string[] {
  const sorted = [...times].sort((a, b) => a - b);
  const reached = goal === null ? '-' : quantile(sorted, 0.95) < goal ? 'yes' : 'no';
  const figures = [0.5, 0.95, 1].map((share) => short(quantile(sorted, share), 1));
  return [name, ...figures, `${sorted.length}`, goal === null ? '-' : `${goal}`, reached];
}

/**
 * Times the review page as a reviewer has it: a production build, MariaDB and Redis, Chromium at 1440 by 900, spectra of
 * 10,000 pixels. Prints key press to next spectrum drawn, one redraw, and frames while the redshift is dragged.
 */
export async function runReview({ count, seed }: ReviewOptions): Promise<void> {
  // Needed by this bench alone, and not part of a production installation.
  const { chromium } = await import('@playwright/test');
  const installation = await startInstallation();
  const browser = await chromium.launch({
    executablePath: '/usr/bin/chromium',
    args: ['--no-sandbox', '--disable-gpu', '--disable-background-networking', '--no-first-run'],
  });
  try {
    const { origin } = installation;
    const context = await browser.newContext({ viewport: { width: 1440, height: 900 } });
    const page = await context.newPage();
    await page.addInitScript(watchDrawing);
    const ready = () => page.locator('[data-ready]').waitFor({ state: 'attached' });
    const signIn = async (firstName: string) => {
      await context.clearCookies();
      await page.goto(`${origin}/sign-in`);
      await ready();
      const { email, password } = installation.account(firstName);
      await page.getByLabel('E-mail').fill(email);
      await page.getByLabel('Password').fill(password);
      await page.getByRole('button', { name: 'Sign in' }).click();
      await page.waitForURL((url) => !url.pathname.includes('sign-in'));
    };
    await signIn('Rua');
    const cookie = (await context.cookies()).map(({ name, value }) => `${name}=${value}`).join('; ');
    const request = (path: string, init: RequestInit = {}) =>
      fetch(`${origin}${path}`, { ...init, headers: { ...init.headers, cookie, origin } });
    process.stderr.write(`Measuring ${count} spectra of ${REVIEW_PIXELS} pixels.\n`);
    const night = await submitNight(request, '2026-09-20', reviewFiles(count, seed));
    await signIn('Ines');
    await page.goto(`${origin}/review?night=${night}`);
    await ready();
    const href = await page.getByRole('link', { name: /^Start with/ }).getAttribute('href');
    await page.goto(`${origin}${href}`);
    await ready();
    const half = Math.floor((count - 6) / 2);
    const processor = await processorTimeOf(await context.newCDPSession(page));
    const verdicts = await timeNext(page, processor, 'x', half, 2);
    const leaves = await timeNext(page, processor, '.', half, 2);
    const redraws = await timeRedraws(page, processor, 60);
    const frames = await timeDrag(page, 200);
    const rate = (1000 * frames.length) / frames.reduce((sum, time) => sum + time, 0);
    process.stdout.write(
      `\nReview, ${REVIEW_PIXELS} pixels, seed ${seed}; ${cpus()[0]?.model}, ${cpus().length} cores, load ${loadavg()[0].toFixed(1)}; times in ms\n\n` +
        `${layOutTable(
          ['', 'median', '95 %', 'longest', 'count', 'goal', 'reached'],
          [
            row('verdict key to next spectrum drawn', verdicts.clock, 100),
            row("  of it in the page's own thread", verdicts.processor, null),
            row('leafing key to next spectrum drawn', leaves.clock, 100),
            row("  of it in the page's own thread", leaves.processor, null),
            row('one redraw, script, style and layout', redraws.clock, 8),
            row('  processor time of it, mean', [redraws.unpainted], 8),
            row('  processor time with painting, mean', [redraws.whole], null),
            row('between frames while z is dragged', frames, null),
          ],
        )}\n\n${short(rate, 0)} frames a second while z is dragged\n`,
    );
  } finally {
    await browser.close();
    await installation.stop();
  }
}

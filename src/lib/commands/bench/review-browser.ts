import type { CDPSession, Page } from '@playwright/test';

/** Times of one kind of press: by the clock, and of the page's own thread, which other work on the machine hardly moves; ms. */
export interface PressTimes {
  clock: number[];
  processor: number[];
}

/** Pause between two verdicts, ms: quick, yet long enough that a person could have looked. */
const LOOK_MS = 900;

/**
 * Watches the page from inside: when a canvas was last drawn on (each drawing begins by clearing it), and when a frame
 * that shows another spectrum than at the key press has been painted. Must be installed before the page loads.
 */
export function watchDrawing(): void {
  const state = { lastClear: 0 };
  const prototype = CanvasRenderingContext2D.prototype;
  const clearRect = prototype.clearRect;
  prototype.clearRect = function (...box) {
    state.lastClear = performance.now();
    return clearRect.apply(this, box);
  };
  const title = () => document.querySelector('h1')?.textContent ?? '';
  Object.assign(window, {
    benchNext: () =>
      new Promise<number>((resolve) => {
        const before = title();
        addEventListener(
          'keydown',
          ({ timeStamp: pressed }) => {
            const look = () => {
              if (title() === before || state.lastClear < pressed || !document.querySelector('.plot canvas')) {
                return requestAnimationFrame(look);
              }
              // A message sent from a frame's callback arrives once that frame is painted.
              const { port1, port2 } = new MessageChannel();
              port1.onmessage = () => resolve(performance.now() - pressed);
              port2.postMessage(null);
            };
            requestAnimationFrame(look);
          },
          { once: true, capture: true },
        );
      }),
    benchRedraw: () =>
      new Promise<number>((resolve) => {
        const start = performance.now();
        document.dispatchEvent(new KeyboardEvent('keydown', { key: 'ArrowRight', bubbles: true }));
        const { port1, port2 } = new MessageChannel();
        port1.onmessage = () => {
          // Reading a size makes the browser lay the page out, which the frame would do next.
          void document.body.offsetHeight;
          resolve(state.lastClear > start ? performance.now() - start : NaN);
        };
        queueMicrotask(() => port2.postMessage(null));
      }),
    benchFrames: () => {
      const frames: number[] = [];
      let running = true;
      const tick = (at: number) => {
        frames.push(at);
        if (running) requestAnimationFrame(tick);
      };
      requestAnimationFrame(tick);
      return () => {
        running = false;
        return frames;
      };
    },
  });
}

interface BenchWindow {
  benchNext: () => Promise<number>;
  benchRedraw: () => Promise<number>;
  benchFrames: () => () => number[];
  benchPressed?: Promise<number>;
  benchStop?: () => number[];
}
declare const window: BenchWindow & Window;

/** Processor time that the page's own thread has used so far, ms: in all, painting included, and less painting. */
export type ProcessorTime = () => Promise<{ whole: number; unpainted: number }>;

const UNPAINTED = ['ScriptDuration', 'RecalcStyleDuration', 'LayoutDuration'];

export async function processorTimeOf(session: CDPSession): Promise<ProcessorTime> {
  await session.send('Performance.enable', { timeDomain: 'threadTicks' });
  return async () => {
    const { metrics } = await session.send('Performance.getMetrics');
    const total = (names: string[]) =>
      metrics.reduce((sum, { name, value }) => sum + (names.includes(name) ? 1000 * value : 0), 0);
    return { whole: total(['TaskDuration']), unpainted: total(UNPAINTED) };
  };
}

/** Presses a key that leads to the next spectrum again and again; the first ones warm the page up and are not counted. */
export async function timeNext(
  page: Page,
  processor: ProcessorTime,
  key: string,
  count: number,
  warmUp: number,
): Promise<PressTimes> {
  const times: PressTimes = { clock: [], processor: [] };
  for (let i = 0; i < warmUp + count; i++) {
    await page.waitForTimeout(LOOK_MS);
    // The listener is set before the key goes down.
    await page.evaluate(() => void (window.benchPressed = window.benchNext()));
    const before = await processor();
    await page.keyboard.press(key);
    const time = await page.evaluate(() => window.benchPressed!);
    if (i < warmUp) continue;
    times.clock.push(time);
    times.processor.push((await processor()).whole - before.whole);
  }
  return times;
}

/**
 * Redraws as an arrow key moves the redshift, a frame each: script and layout of every one by the clock, and the
 * processor time of the page's own thread a redraw, painting included.
 */
export async function timeRedraws(
  page: Page,
  processor: ProcessorTime,
  count: number,
): Promise<{ clock: number[]; whole: number; unpainted: number }> {
  const redraw = (times: number) =>
    page.evaluate(async (left) => {
      const clock: number[] = [];
      for (; left > 0; left--) {
        clock.push(await window.benchRedraw());
        await new Promise((resolve) => requestAnimationFrame(resolve));
      }
      return clock;
    }, times);
  await redraw(10);
  const before = await processor();
  const clock = await redraw(count);
  const after = await processor();
  return {
    clock,
    whole: (after.whole - before.whole) / count,
    unpainted: (after.unpainted - before.unpainted) / count,
  };
}

/** Times between frames while the redshift is dragged through the spectrum, ms. */
export async function timeDrag(page: Page, moves: number): Promise<number[]> {
  const box = (await page.getByRole('application', { name: /^Spectrum plot/ }).boundingBox())!;
  const y = box.y + box.height / 2;
  await page.mouse.move(box.x + box.width / 2, y);
  await page.mouse.down();
  await page.evaluate(() => void (window.benchStop = window.benchFrames()));
  for (let i = 0; i < moves; i++) {
    await page.mouse.move(box.x + box.width * (0.5 + 0.3 * Math.sin((6 * i) / moves)), y);
  }
  const frames = await page.evaluate(() => window.benchStop!());
  await page.mouse.up();
  return frames.slice(1).map((at, i) => at - frames[i]);
}

import { cpus } from 'node:os';
import { Piscina } from 'piscina';
import { layOutTable, short } from './print-table';
import type { SpeedResult, SpeedTask } from './speed-thread';
import { mean, median } from './statistics';

export interface SpeedOptions {
  count: number;
  seed: number;
}

function onThreads(threads: number): Piscina {
  return new Piscina({
    filename: new URL('./bench/speed-thread.js', import.meta.url).href,
    minThreads: threads,
    maxThreads: threads,
  });
}

/**
 * Times the engine on one thread, then on two at once, beside the plain fit on the same spectra, and prints the table. Rates of one
 * thread are by processor time, which other work on the machine hardly moves; the others are by the clock.
 */
export async function runSpeed({ count, seed }: SpeedOptions): Promise<void> {
  const task: SpeedTask = { count, warmUp: 60, seed, plain: 12 };
  const one = onThreads(1);
  const alone = (await one.run(task, { name: 'timeSpectra' })) as SpeedResult;
  await one.destroy();

  const residentBefore = process.memoryUsage().rss;
  const two = onThreads(2);
  const start = performance.now();
  const both = (await Promise.all(
    [0, 1].map((k) => two.run({ ...task, plain: 0, seed: seed + 1 + k }, { name: 'timeSpectra' })),
  )) as SpeedResult[];
  const wall = performance.now() - start;
  const resident = (process.memoryUsage().rss - residentBefore) / 2 / 1e6;
  await two.destroy();

  const wallRate = 1000 / mean(alone.milliseconds);
  const rate = (1000 * count) / alone.processorMilliseconds;
  const sorted = [...alone.milliseconds].sort((a, b) => a - b);
  const plainRate = (1000 * task.plain) / alone.plainProcessorMilliseconds;
  const pairRate = both.reduce((sum, r) => sum + 1000 / mean(r.milliseconds), 0);
  const verdict = (is: boolean, floor: boolean) => (is ? 'yes' : floor ? 'floor' : 'no');
  const rows = [
    ['spectra per second of one processor', short(rate, 1), `${count}`, '40', '100', verdict(rate >= 100, rate >= 40)],
    ['plain fit, spectra per second of one processor', short(plainRate, 2), `${task.plain}`, '-', '-', '-'],
    [
      'times the plain fit',
      short(rate / plainRate, 1),
      `${task.plain}`,
      '-',
      '50',
      verdict(rate >= 50 * plainRate, false),
    ],
    ['spectra/s by the clock, one thread', short(wallRate, 1), `${count}`, '-', '-', '-'],
    ['milliseconds, median', short(median(sorted), 1), `${count}`, '-', '-', '-'],
    ['milliseconds, 99 %', short(sorted[Math.floor(0.99 * sorted.length)], 1), `${count}`, '-', '-', '-'],
    ['spectra/s on two threads at once', short(pairRate, 1), `${2 * count}`, '-', '-', '-'],
    [
      'memory of a thread over its input, MB',
      short(alone.memoryMegabytes, 0),
      '1',
      '-',
      '150',
      verdict(alone.memoryMegabytes < 150, false),
    ],
    ['resident memory of a thread, input included, MB', short(resident, 0), '2', '-', '-', '-'],
  ];
  process.stdout.write(
    `\nSpeed, 4,000 pixels, mixed classes, seed ${seed}; ${cpus()[0]?.model}, ${cpus().length} cores; ${(wall / 1000).toFixed(0)} s\n\n`,
  );
  process.stdout.write(`${layOutTable(['', 'measured', 'count', 'floor', 'goal', 'reached'], rows)}\n`);
}

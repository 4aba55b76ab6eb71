import { mkdirSync, writeFileSync } from 'node:fs';
import { availableParallelism } from 'node:os';
import { join } from 'node:path';
import { Piscina } from 'piscina';
import {
  tableByClass,
  tableBySignal,
  tableOfBounds,
  tableOfIdentities,
  tableOfPulls,
  tableOfReliability,
} from './break-down';
import { listFaults } from './list-faults';
import type { Outcome } from './outcome';
import { FLAVOURS, planSpectra } from './plan-spectra';
import { layOutTable, percent, short } from './print-table';
import { reliabilityBins, reliabilitySvg } from './reliability';
import type { FlavourOffset } from './run-task';
import { scoreSampleNight } from './sample-night';
import { forecastsOf, score, type ScoreRow } from './score';
import { median } from './statistics';

export interface AccuracyOptions {
  count: number;
  seed: number;
  threads: number | null;
  perFlavour: number;
  sampleNight: string | null;
  out: string;
}

function flavourRows(offsets: readonly FlavourOffset[]): ScoreRow[] {
  return FLAVOURS.map((flavour) => {
    const all = offsets.filter((o) => o.flavour === flavour);
    const right = all.map((o) => o.offsetKms).filter((v): v is number => v !== null);
    const bias = median(right);
    const reached =
      right.length < 150 ? 'needs 150' : Math.abs(bias) <= 1 ? 'yes' : Math.abs(bias) <= 10 ? 'floor' : 'no';
    return {
      what: `median bias, km/s: ${flavour}`,
      measured: bias,
      count: right.length,
      floor: '10',
      goal: '1',
      reached,
      format: 'number',
      note: `of ${all.length}`,
    };
  });
}

function printRows(rows: readonly ScoreRow[]): string {
  return layOutTable(
    ['', 'measured', 'count', 'floor', 'goal', 'reached', 'note'],
    rows.map((row) => [
      row.what,
      row.format === 'percent' ? percent(Math.round(row.measured * row.count), row.count) : short(row.measured),
      `${row.count}`,
      row.floor,
      row.goal,
      row.reached,
      row.note,
    ]),
  );
}

/** Prints every table about these outcomes. */
function report(title: string, outcomes: readonly Outcome[], extra: readonly ScoreRow[] = []): string {
  return [
    `\n${title}\n`,
    printRows([...score(outcomes), ...extra]),
    '\nBy class (wrong: off by more than 1,000 km/s)\n',
    tableByClass(outcomes),
    '\nBy signal-to-noise ratio of the best feature\n',
    tableBySignal(outcomes),
    '\nSingle lines: true identity against the answer\n',
    tableOfIdentities(outcomes),
    '\nPulls: spread of (measured - true) / quoted error, narrow lines\n',
    tableOfPulls(outcomes),
    '\nScatter over the Cramér-Rao bound\n',
    tableOfBounds(outcomes),
    '\nReliability of the best candidate (event: within 1,000 km/s)\n',
    tableOfReliability(outcomes),
    '',
  ].join('\n');
}

/**
 * Simulates, measures and scores; prints the tables and writes `accuracy.json` (every outcome), `faults.txt` and
 * `reliability.svg` into `out`.
 *
 * @throws where the engine throws on a spectrum: an accuracy bench must not swallow that
 */
export async function runAccuracy(options: AccuracyOptions): Promise<void> {
  const { count, seed, perFlavour, sampleNight, out } = options;
  const threads = options.threads ?? availableParallelism();
  const pool = new Piscina({
    filename: new URL('./bench/accuracy-thread.js', import.meta.url).href,
    minThreads: threads,
    maxThreads: threads,
  });
  const start = performance.now();
  const tasks = planSpectra(count, seed, perFlavour);
  const results: (Outcome | FlavourOffset)[] = [];
  let done = 0;
  await Promise.all(
    tasks.map(async (task) => {
      results.push(...((await pool.run(task, { name: 'scoreTask' })) as (Outcome | FlavourOffset)[]));
      done++;
      if (done % 100 === 0) process.stderr.write(`${Math.round((100 * done) / tasks.length)} %\n`);
    }),
  );
  await pool.destroy();
  // threads finish in any order; the report must not depend on it
  const outcomes = results
    .filter((r): r is Outcome => 'group' in r)
    .sort((a, b) => (a.group === b.group ? a.seed - b.seed : a.group < b.group ? -1 : 1));
  const offsets = results.filter((r): r is FlavourOffset => 'flavour' in r);
  const seconds = (performance.now() - start) / 1000;

  const title = `Accuracy on ${outcomes.length} simulated spectra, seed ${seed}, ${seconds.toFixed(0)} s on ${threads} threads`;
  process.stdout.write(report(title, outcomes, flavourRows(offsets)));
  mkdirSync(out, { recursive: true });
  writeFileSync(
    join(out, 'reliability.svg'),
    reliabilitySvg(reliabilityBins(forecastsOf(outcomes)), 'Reliability, simulated spectra'),
  );
  writeFileSync(join(out, 'accuracy.json'), JSON.stringify({ count, seed, rows: score(outcomes), outcomes }));
  const faults = listFaults(outcomes);
  writeFileSync(join(out, 'faults.txt'), faults.map((line) => `${line}\n`).join(''));
  process.stdout.write(`\n${faults.length} spectra worth a look: ${join(out, 'faults.txt')}\n`);
  process.stdout.write(`Also written: ${join(out, 'accuracy.json')}, ${join(out, 'reliability.svg')}\n`);
  if (sampleNight) {
    const { outcomes: sample, failures } = scoreSampleNight(sampleNight);
    process.stdout.write(report(`The sample night in ${sampleNight}: ${sample.length} spectra`, sample));
    for (const failure of failures) process.stdout.write(`not read: ${failure}\n`);
    for (const line of listFaults(sample)) process.stdout.write(`${line}\n`);
  }
}

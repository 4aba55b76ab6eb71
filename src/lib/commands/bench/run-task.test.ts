import { describe, expect, it } from 'vitest';
import type { Outcome } from './outcome';
import { planSpectra, type BenchTask } from './plan-spectra';
import { runTask, type FlavourOffset } from './run-task';

const outcomes = (task: BenchTask) => runTask(task) as Outcome[];

describe('planSpectra', () => {
  it('spreads the count over the groups without losing or doubling a seed', () => {
    const tasks = planSpectra(1000, 1, 0);
    const seen = new Map<string, number>();
    let total = 0;
    for (const task of tasks) {
      if (task.kind !== 'group') continue;
      expect(task.from).toBe(seen.get(task.group) ?? 0);
      seen.set(task.group, task.to);
      total += task.to - task.from;
    }
    expect(total).toBeGreaterThan(990);
    expect(total).toBeLessThan(1010);
  });
});

// a few spectra end to end, so that a broken engine or bench shows here and not only in a long run
describe('runTask, accuracy smoke test', { timeout: 60_000 }, () => {
  it('finds the redshift of strong clean spectra, within a few of the bound', () => {
    const results = outcomes({ kind: 'group', group: 'precision', seed: 77, from: 0, to: 12 });
    expect(results.filter((o) => o.judged.right).length).toBeGreaterThan(9);
    for (const { judged } of results) if (judged.overBound !== null) expect(Math.abs(judged.overBound)).toBeLessThan(6);
  });

  it('claims nothing secure on pure noise', () => {
    const results = outcomes({ kind: 'group', group: 'pure noise', seed: 77, from: 0, to: 10 });
    expect(results.filter((o) => o.answer.confidence === 'secure')).toEqual([]);
    expect(results.every((o) => !o.judged.right && o.known.redshift === null)).toBe(true);
  });

  it('gives the same outcome for the same task', () => {
    const task: BenchTask = { kind: 'group', group: 'quasar', seed: 5, from: 0, to: 2 };
    const timeless = (o: Outcome) => ({ ...o, milliseconds: 0 });
    expect(outcomes(task).map(timeless)).toEqual(outcomes(task).map(timeless));
  });

  it('measures a topocentric spectrum in air as it does a barycentric one in vacuum', () => {
    const task = (flavour: 'topocentric, air, reversed'): BenchTask => ({
      kind: 'flavour',
      flavour,
      seed: 3,
      from: 0,
      to: 6,
    });
    const offsets = (runTask(task('topocentric, air, reversed')) as FlavourOffset[])
      .map((o) => o.offsetKms)
      .filter((v): v is number => v !== null);
    expect(offsets.length).toBeGreaterThan(2);
    // a wrong sign of the barycentric correction would show as up to 60 km/s, air for vacuum as 83
    expect(Math.abs(offsets.sort((a, b) => a - b)[offsets.length >> 1])).toBeLessThan(10);
  });
});

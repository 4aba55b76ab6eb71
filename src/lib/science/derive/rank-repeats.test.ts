import { describe, expect, it } from 'vitest';
import type { ExposureNeeded } from './exposure-needed';
import { rankRepeats, reachOf, worthBitsPerHour, type Repeat } from './rank-repeats';

const HOUR = 3_600_000;
const needed = (extraSeconds: number | null, atLeast = false): ExposureNeeded => ({
  factor: 2,
  extraSeconds,
  atLeast,
  limitedBy: 'second line',
  decisive: { line: null, now: 2, then: 4 },
});
const repeat = (
  name: string,
  openBits: number,
  need: ExposureNeeded | null,
  hoursUp: number,
): Repeat & { name: string } => ({
  name,
  openBits,
  needed: need,
  placeKnown: true,
  up: hoursUp > 0 ? { fromMs: 0, untilMs: hoursUp * HOUR } : null,
});

describe('rankRepeats', () => {
  it('puts what fits before what does not, and bits an hour within', () => {
    const repeats = [
      repeat('set', 2, needed(600), 0),
      repeat('too long', 2, needed(7200), 1),
      repeat('cheap', 1, needed(900), 1),
      repeat('dear', 1, needed(1800), 1),
      repeat('bound', 9, needed(900, true), 1),
      repeat('no figure', 1, null, 1),
    ];
    const order = rankRepeats(repeats).map(({ name }) => name);
    expect(order).toEqual(['cheap', 'dear', 'bound', 'too long', 'no figure', 'set']);
  });
  it('tells what fits, what fits in part, what is down and what is not known', () => {
    expect(reachOf(repeat('', 1, needed(3600), 1))).toBe('fits');
    expect(reachOf(repeat('', 1, needed(3601), 1))).toBe('in part');
    expect(reachOf(repeat('', 1, needed(60), 0))).toBe('down');
    expect(reachOf(repeat('', 1, needed(60), 4 / 60))).toBe('down');
    expect(reachOf(repeat('', 1, needed(null), 1))).toBe('not known');
    expect(reachOf({ ...repeat('', 1, needed(60), 1), placeKnown: false })).toBe('not known');
  });
  it('counts worth in bits for an hour', () => {
    expect(worthBitsPerHour(repeat('', 1.5, needed(1800), 1))).toBe(3);
    expect(worthBitsPerHour(repeat('', 1.5, null, 1))).toBeNull();
  });
});

import { describe, expect, it } from 'vitest';
import { nextBatch, type Waiting } from './next-batch';

const file = (name: string, sizeBytes = 10, alone = false): Waiting => ({ name, sizeBytes, alone });
const plan = (files: Waiting[], maxFiles: number, maxBytes: number) => {
  const sizes = [];
  for (let rest = files; rest.length > 0;) {
    const count = nextBatch(rest, maxFiles, maxBytes);
    sizes.push(count);
    rest = rest.slice(count);
  }
  return sizes;
};

describe('nextBatch', () => {
  it('puts small files together up to the number a request may bring', () => {
    const files = Array.from({ length: 7 }, (_, i) => file(`${i}.fits`));
    expect(plan(files, 3, 1000)).toEqual([3, 3, 1]);
  });
  it('keeps a request under its bytes', () => {
    expect(plan([file('a', 60), file('b', 30), file('c', 30)], 10, 100)).toEqual([2, 1]);
  });
  it('sends a file larger than a request by itself, whatever waits before or behind it', () => {
    expect(plan([file('a'), file('large', 500), file('b'), file('c')], 10, 100)).toEqual([1, 1, 2]);
  });
  it('never puts two files of one name into one request', () => {
    expect(plan([file('a'), file('b'), file('a'), file('c')], 10, 1000)).toEqual([2, 2]);
  });
  it('sends alone what was refused in company', () => {
    expect(plan([file('a', 10, true), file('b'), file('c', 10, true)], 10, 1000)).toEqual([1, 1, 1]);
  });
  it('takes empty files along and ends with an empty queue', () => {
    expect(plan([file('a', 0), file('b', 0)], 10, 1000)).toEqual([2]);
    expect(nextBatch([])).toBe(0);
  });
});

import { describe, expect, it } from 'vitest';
import { neighbour, upcoming } from './queue-order';

describe('upcoming', () => {
  const queue = { ids: ['a', 'b', 'c', 'd', 'e'], done: ['c'] };
  it('passes over what has a verdict and goes round to the start', () => {
    expect(upcoming(queue, 'b', 3)).toEqual(['d', 'e', 'a']);
  });
  it('never deals the same spectrum again', () => {
    expect(upcoming({ ids: ['a'], done: [] }, 'a', 3)).toEqual([]);
    expect(upcoming({ ids: ['a', 'b'], done: ['b'] }, 'a', 3)).toEqual([]);
  });
  it('starts at the front for a spectrum outside the queue', () => {
    expect(upcoming(queue, 'x', 2)).toEqual(['a', 'b']);
  });
});

describe('neighbour', () => {
  it('leafs to both sides and stops at the ends', () => {
    expect([neighbour(['a', 'b'], 'a', 1), neighbour(['a', 'b'], 'a', -1), neighbour(['a'], 'x', 1)]).toEqual([
      'b',
      null,
      null,
    ]);
  });
});

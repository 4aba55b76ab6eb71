import { describe, expect, it } from 'vitest';
import { logarithmicTicks } from './logarithmic-ticks';

describe('logarithmicTicks', () => {
  it('has 1, 2 and 5 of each decade', () => {
    expect(logarithmicTicks(0.15, 12)).toEqual([0.2, 0.5, 1, 2, 5, 10]);
  });

  it('has decades alone over a wide range, and nothing without one', () => {
    expect(logarithmicTicks(1e-3, 1e3)).toEqual([1e-3, 1e-2, 0.1, 1, 10, 100, 1000]);
    expect(logarithmicTicks(0, 5)).toEqual([]);
    expect(logarithmicTicks(5, 5)).toEqual([]);
  });
});

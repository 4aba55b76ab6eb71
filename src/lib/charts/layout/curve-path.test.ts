import { describe, expect, it } from 'vitest';
import { curvePath, robustRange } from './curve-path';

describe('curvePath', () => {
  it('breaks at NaN, so that a gap stays a gap', () => {
    const path = curvePath(
      Float64Array.from([1, 2, NaN, 3]),
      (column) => column,
      (value) => 10 - value,
    );
    expect(path).toBe('M0.5 9.0L1.5 8.0M3.5 7.0');
  });
});

describe('robustRange', () => {
  it('is not stretched by one wild value', () => {
    const values = [...Array.from({ length: 999 }, (_, i) => i / 998), 1e9];
    const [low, high] = robustRange(values);
    expect(low).toBeLessThan(0.01);
    expect(high).toBeLessThan(1.2);
  });

  it('keeps some height for a constant, and is 0 to 1 for nothing', () => {
    expect(robustRange([5, 5])).toEqual([4.5, 5.5]);
    expect(robustRange([NaN])).toEqual([0, 1]);
  });
});

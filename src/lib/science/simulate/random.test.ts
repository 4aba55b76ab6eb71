import { describe, expect, it } from 'vitest';
import { Random } from './random';

describe('Random', () => {
  it('steps its state as xoshiro128** does (first outputs from state 1, 2, 3, 4 worked by hand from Blackman & Vigna 2018)', () => {
    const random = new Random(1);
    (random as unknown as { state: Uint32Array }).state.set([1, 2, 3, 4]);
    expect([random.bits(), random.bits(), random.bits()]).toEqual([11520, 0, 5927040]);
  });

  it('repeats itself for one seed and differs for the next', () => {
    const draw = (seed: number) =>
      Array.from(
        { length: 5 },
        (
          (r) => () =>
            r.uniform()
        )(new Random(seed)),
      );
    expect(draw(42)).toEqual(draw(42));
    expect(draw(42)).not.toEqual(draw(43));
    expect(draw(2 ** 40)).not.toEqual(draw(2 ** 41));
  });

  it('gives uniform and normal deviates of the right mean and variance', () => {
    const random = new Random(7);
    const n = 40000;
    let sum = 0;
    let square = 0;
    let fourth = 0;
    let uniform = 0;
    for (let i = 0; i < n; i++) {
      const x = random.normal();
      sum += x;
      square += x * x;
      fourth += x ** 4;
      uniform += random.uniform();
    }
    expect(Math.abs(sum / n)).toBeLessThan(4 / Math.sqrt(n));
    expect(Math.abs(square / n - 1)).toBeLessThan((4 * Math.SQRT2) / Math.sqrt(n));
    expect(Math.abs(fourth / n - 3)).toBeLessThan(0.25);
    expect(Math.abs(uniform / n - 0.5)).toBeLessThan(4 / Math.sqrt(12 * n));
  });

  it('keeps whole numbers within both ends', () => {
    const random = new Random(3);
    const seen = new Set(Array.from({ length: 200 }, () => random.integer(-1, 2)));
    expect([...seen].sort((a, b) => a - b)).toEqual([-1, 0, 1, 2]);
  });
});

import { expect, it } from 'vitest';
import { selectInPlace } from './order-statistics';

/** Numbers of a fixed seed, some of them alike. */
function draw(count: number, distinct: number, seed: number): Float64Array {
  let state = seed;
  return Float64Array.from({ length: count }, () => {
    state = (state * 48271) % 2147483647;
    return Math.floor((state / 2147483647) * distinct) - distinct / 2;
  });
}

it.each([
  [1, 5],
  [600, 1e6],
  [5000, 1e9],
  [5000, 7],
  [20000, 1e9],
])('gives what sorting gives for %d values of %d kinds', (count, distinct) => {
  const values = draw(count, distinct, 7);
  const sorted = Float64Array.from(values).sort();
  for (const k of [0, 1, count >> 2, count >> 1, Math.floor(0.9 * count), count - 1]) {
    expect(selectInPlace(values.slice(), count, k)).toBe(sorted[Math.min(count - 1, k)]);
  }
});

it('looks at the first values alone, and says NaN where there are none', () => {
  expect(selectInPlace(Float64Array.of(3, 1, 2, -9), 3, 1)).toBe(2);
  expect(selectInPlace(Float64Array.of(3), 0, 0)).toBeNaN();
});

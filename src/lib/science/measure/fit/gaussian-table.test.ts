import { expect, it } from 'vitest';
import { tabulatedCumulative } from './gaussian-table';

it('gives the normal distribution to the printed digits (Abramowitz & Stegun 1964, table 26.1, from memory)', () => {
  const table = [
    [0, 0.5],
    [0.5, 0.691462461274013],
    [1, 0.841344746068543],
    [1.96, 0.97500210485178],
    [2, 0.977249868051821],
    [3, 0.99865010196837],
  ];
  for (const [t, cumulative] of table) {
    expect(Math.abs(tabulatedCumulative(t) - cumulative)).toBeLessThan(1e-12);
    expect(Math.abs(tabulatedCumulative(-t) - (1 - cumulative))).toBeLessThan(1e-12);
  }
});

it('keeps the digits of the tail and joins from node to node', () => {
  // Q(6) = 9.865876450377e-10 (Abramowitz & Stegun 1964, table 26.2 and 7.1.13; from memory).
  expect(tabulatedCumulative(-6) / 9.865876450377e-10).toBeCloseTo(1, 9);
  for (let k = -500; k < 500; k++) {
    const middle = (k + 0.5) / 64;
    expect(tabulatedCumulative(middle + 1e-12) - tabulatedCumulative(middle - 1e-12)).toBeLessThan(2e-12);
  }
});

it('ends in 0 and 1 beyond the limit and passes NaN on', () => {
  expect([-Infinity, -9, 9, Infinity].map(tabulatedCumulative)).toEqual([0, 0, 1, 1]);
  expect(tabulatedCumulative(NaN)).toBeNaN();
});

import { describe, expect, it } from 'vitest';
import { axisExponent, axisTicks, roundBelow } from './axis-ticks';

describe('axisTicks', () => {
  it('steps by 1, 2 or 5 times a power of ten inside the range', () => {
    expect(axisTicks(3700, 9300, 9)).toEqual({
      values: [4000, 4500, 5000, 5500, 6000, 6500, 7000, 7500, 8000, 8500, 9000],
      step: 500,
      decimals: 0,
    });
    for (const [from, to] of [
      [-0.3, 4.1],
      [6471, 6893],
      [0, 1e-17],
      [-2, 31],
    ]) {
      const { values, step } = axisTicks(from, to, 5);
      expect([1, 2, 5]).toContainEqual(Math.round(step / 10 ** Math.floor(Math.log10(step) + 1e-9)));
      expect(values.every((value) => value >= from && value <= to)).toBe(true);
    }
  });
  it('counts the decimals that tell ticks apart', () => {
    expect([axisTicks(0, 1, 10).decimals, axisTicks(0, 0.1, 5).decimals, axisTicks(0, 40, 5).decimals]).toEqual([
      1, 2, 0,
    ]);
  });
  it('has none for an empty range', () => {
    expect(axisTicks(2, 2, 5).values).toEqual([]);
  });
});

describe('axisExponent and roundBelow', () => {
  it('takes a power of ten out only where labels would be long', () => {
    expect([3.4, 0.02, 99_999, 4.2e-17, 3e6, 0, NaN].map(axisExponent)).toEqual([0, 0, 0, -17, 6, 0, 0]);
  });
  it('rounds down to 1, 2 or 5', () => {
    expect([130, 99, 21, 5, 0.7].map(roundBelow)).toEqual([100, 50, 20, 5, 0.5]);
    expect(roundBelow(0)).toBeNaN();
  });
});

import { describe, expect, it } from 'vitest';
import { uniformNumbers } from './test-spectrum';
import { sumShifted, type ShiftedRow } from './shifted-sums';

describe('sumShifted', () => {
  it('gives the same bits as one row added after the other, whatever the rows reach', () => {
    const uniform = uniformNumbers(7);
    const shifts = [-40, 0, 3, 3, 25, 60, 99, -99, 200, -200, 41];
    const rows: ShiftedRow[] = shifts.map((shift, r) => ({
      values: Float64Array.from({ length: 80 + r }, uniform),
      shift,
    }));
    const expected = new Float64Array(100);
    for (const { values, shift } of rows) {
      for (let m = 0; m < expected.length; m++) expected[m] += values[m + shift] ?? 0;
    }
    const total = new Float64Array(100).fill(NaN);
    sumShifted(rows, total);
    expect(total).toEqual(expected);
  });

  it('is zero without rows', () => {
    const total = new Float64Array(3).fill(1);
    sumShifted([], total);
    expect([...total]).toEqual([0, 0, 0]);
  });
});

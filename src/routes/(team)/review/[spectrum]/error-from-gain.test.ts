import { describe, expect, it } from 'vitest';
import { errorFromGain } from './error-from-gain';

describe('errorFromGain', () => {
  it('finds the sigma of a parabola whatever the step (Avni 1976: delta chi-square 1 at one sigma)', () => {
    const gainAt = (offset: number) => 400 - (offset / 7) ** 2;
    expect(errorFromGain(gainAt, 3)).toBeCloseTo(7, 10);
    expect(errorFromGain(gainAt, 50)).toBeCloseTo(7, 10);
  });
  it('knows no error where there is no maximum', () => {
    expect(errorFromGain(() => 0, 3)).toBeNull();
    expect(errorFromGain((offset) => offset ** 2, 3)).toBeNull();
  });
});

import { describe, expect, it } from 'vitest';
import { smoothInverseVariance } from './smooth';

const array = (...values: number[]) => Float64Array.from(values);

describe('smoothInverseVariance', () => {
  it('leaves a constant constant and gives noisy pixels little say', () => {
    const flux = array(2, 2, 2, 50, 2, 2);
    const smooth = smoothInverseVariance(flux, array(1, 1, 1, 1e6, 1, 1), 1);
    smooth.forEach((value) => expect(value).toBeCloseTo(2, 6));
  });
  it('neither uses nor changes unusable pixels', () => {
    const smooth = smoothInverseVariance(array(1, 99, 1), array(1, NaN, 1), 1);
    expect([...smooth]).toEqual([1, 99, 1]);
  });
});

import { describe, expect, it } from 'vitest';
import { smoothInverseVariance } from './smooth';

const array = (...values: number[]) => Float64Array.from(values);

describe('smoothInverseVariance', () => {
  it('leaves a constant constant and gives noisy pixels little say', () => {
    const flux = array(2, 2, 2, 50, 2, 2);
    const { flux: smooth } = smoothInverseVariance(flux, array(1, 1, 1, 1e6, 1, 1), 1);
    smooth.forEach((value) => expect(value).toBeCloseTo(2, 6));
  });
  it('neither uses nor changes unusable pixels', () => {
    const smooth = smoothInverseVariance(array(1, 99, 1), array(1, NaN, 1), 1);
    expect([...smooth.flux]).toEqual([1, 99, 1]);
    expect(smooth.error[1]).toBeNaN();
  });
  it('gives the error of the weighted mean: 1 over the root of 2 sigma root pi for equal errors', () => {
    const [flat, ones] = [new Float64Array(201).fill(3), new Float64Array(201).fill(1)];
    const { error } = smoothInverseVariance(flat, ones, 4);
    expect(error[100]).toBeCloseTo(1 / Math.sqrt(2 * 4 * Math.sqrt(Math.PI)), 3);
  });
});

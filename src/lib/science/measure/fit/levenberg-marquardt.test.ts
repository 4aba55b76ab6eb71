import { describe, expect, it } from 'vitest';
import { levenbergMarquardt } from './levenberg-marquardt';

const x = [0, 1, 2, 3, 4, 5];
const line = x.map((value) => 2 - 3 * value);

describe('levenbergMarquardt', () => {
  it('solves a straight line exactly and says that it converged', () => {
    const result = levenbergMarquardt(
      (b, residuals) => x.forEach((value, i) => (residuals[i] = line[i] - b[0] - b[1] * value)),
      [0, 0],
      x.length,
    );
    expect(result.converged).toBe(true);
    expect(result.parameters[0]).toBeCloseTo(2, 10);
    expect(result.parameters[1]).toBeCloseTo(-3, 10);
  });

  it('takes analytic derivatives', () => {
    const result = levenbergMarquardt(
      (b, residuals) => x.forEach((value, i) => (residuals[i] = Math.exp(-0.4 * value) - Math.exp(-b[0] * value))),
      [1],
      x.length,
      { jacobian: (b, jacobian) => x.forEach((value, i) => (jacobian[i] = value * Math.exp(-b[0] * value))) },
    );
    expect(result.parameters[0]).toBeCloseTo(0.4, 9);
  });

  it('refuses fewer residuals than parameters', () => {
    expect(() => levenbergMarquardt(() => {}, [1, 2, 3], 2)).toThrow(RangeError);
  });
});

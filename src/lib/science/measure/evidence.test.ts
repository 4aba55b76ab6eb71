import { describe, expect, it } from 'vitest';
import { familyEvidence, openReference } from './evidence';

const single = (right: number, information: number) => ({
  count: 1,
  gram: Float64Array.of(information),
  right: Float64Array.of(right),
});
const model = { logRatio: Float64Array.of(0), scatter: Float64Array.of(0.5) };

/** The same integral by brute force: ln(flux) on a fine grid, the reference flux and its scatter added in quadrature. */
function bruteForce(right: number, information: number): number {
  const sigma = Math.hypot(1.8, 0.5);
  let sum = 0;
  const step = 0.001;
  for (let u = -12; u < 12; u += step) {
    const a = Math.exp(u);
    const prior = Math.exp(-0.5 * ((u - 1) / sigma) ** 2) / (sigma * Math.sqrt(2 * Math.PI));
    sum += prior * Math.exp(a * right - 0.5 * a * a * information) * step;
  }
  return Math.log(sum);
}

describe('familyEvidence', () => {
  it.each([0, 2, 5, 10])('agrees with the integral for one line of signal-to-noise %d', (s) => {
    const { logEvidence } = familyEvidence(single(s, 1), model, openReference(0));
    expect(Math.abs(logEvidence - bruteForce(s, 1))).toBeLessThan(0.35);
  });

  it('falls when a line that should be there is not', () => {
    const both = (second: number) =>
      familyEvidence(
        { count: 2, gram: Float64Array.of(1, 0, 0, 1), right: Float64Array.of(10, second) },
        { logRatio: Float64Array.of(0, Math.log(0.8)), scatter: Float64Array.of(0.3, 0.3) },
        openReference(0),
      ).logEvidence;
    expect(both(8)).toBeGreaterThan(both(0) + 25);
  });

  it('is minus infinity without lines', () => {
    const none = { count: 0, gram: new Float64Array(0), right: new Float64Array(0) };
    expect(familyEvidence(none, { logRatio: none.gram, scatter: none.gram }, openReference(0)).logEvidence).toBe(
      -Infinity,
    );
  });
});

import { describe, expect, it } from 'vitest';
import { redshiftBins } from './redshift-bins';

const secure = (...values: number[]) => values.map((redshift) => ({ redshift, confidence: 'secure' as const }));

describe('redshiftBins', () => {
  it('counts every redshift once, by confidence, in bins of 1, 2 or 5', () => {
    const { bins, width } = redshiftBins([...secure(0.31, 0.312, 1.4), { redshift: 0.31, confidence: 'probable' }]);
    expect(width).toBe(0.05);
    expect(bins.reduce((sum, bin) => sum + bin.total, 0)).toBe(4);
    const bin = bins.find(({ from, to }) => from <= 0.31 && 0.31 < to);
    expect(bin?.counts).toEqual({ secure: 2, probable: 1, ambiguous: 0, none: 0 });
  });
  it('puts a value on a boundary into the bin above it, at both ends', () => {
    const { bins } = redshiftBins(secure(0.3, 1.5));
    expect(bins.filter(({ total }) => total).map(({ from }) => from.toFixed(2))).toEqual(['0.30', '1.50']);
  });
  it('reaches below zero for stars', () => {
    const { bins } = redshiftBins(secure(-0.001, 0.4));
    expect(bins[0].from).toBeLessThanOrEqual(-0.001);
    expect(bins[0].total).toBe(1);
  });
  it('has no bin without a value', () => {
    expect(redshiftBins([]).bins).toEqual([]);
    expect(redshiftBins(secure(NaN)).bins).toEqual([]);
  });
});

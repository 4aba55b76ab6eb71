import { describe, expect, it } from 'vitest';
import { honestCount, pullBins } from './pull-bins';

describe('pullBins', () => {
  it('counts every pull once, those beyond the ends apart', () => {
    const { bins, below, above } = pullBins([-7, -5, -0.01, 0, 0.49, 4.99, 5, 12]);
    expect([below, above]).toEqual([1, 2]);
    expect(bins.reduce((sum, { count }) => sum + count, 0)).toBe(5);
    expect(bins.find(({ from }) => from === 0)!.count).toBe(2);
  });
});

describe('honestCount', () => {
  it('adds up to all pulls', () => {
    const { bins, width } = pullBins([]);
    const sum = bins.reduce((total, { from, to }) => total + honestCount((from + to) / 2, 1000, width), 0);
    expect(sum).toBeCloseTo(1000, 1);
  });
});

import { describe, expect, it } from 'vitest';
import { findConflicts } from './find-conflicts';

const answer = (id: string, targetId: string, redshift: number, redshiftError: number | null = 1e-5) => ({
  id,
  targetId,
  redshift,
  redshiftError,
});

describe('findConflicts', () => {
  it('names both sides of two redshifts of one target more than 1,000 km/s apart', () => {
    const found = findConflicts([answer('a', 't', 0.5), answer('b', 't', 0.72), answer('c', 'u', 0.1)]);
    expect([...found].map(([id, { redshift }]) => [id, redshift])).toEqual([
      ['a', 0.72],
      ['b', 0.5],
    ]);
  });

  it('lets pass what is closer, or within three combined errors', () => {
    // c x 0.004 / 1.502 = 798 km/s; c x 0.02 / 1.51 = 3,970 km/s
    expect(findConflicts([answer('a', 't', 0.5), answer('b', 't', 0.504)]).size).toBe(0);
    expect(findConflicts([answer('a', 't', 0.5, 0.005), answer('b', 't', 0.52, 0.005)]).size).toBe(0);
    expect(findConflicts([answer('a', 't', 0.5, 0.004), answer('b', 't', 0.52, null)]).size).toBe(2);
  });

  it('says the furthest of several', () => {
    const found = findConflicts([answer('a', 't', 0.5), answer('b', 't', 0.6), answer('c', 't', 1.2)]);
    expect(found.get('a')?.redshift).toBe(1.2);
    expect(found.get('a')?.kms).toBeCloseTo((299792.458 * 0.7) / 1.85, 6);
  });
});

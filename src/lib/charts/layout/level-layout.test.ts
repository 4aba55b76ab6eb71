import { describe, expect, it } from 'vitest';
import { energyAboveGroundEv, energyAxis, transitionWidth } from './level-layout';

describe('level layout', () => {
  it('puts hydrogen at 10.20 eV (n = 2) and 13.598 eV (limit) above the ground state (NIST ASD)', () => {
    expect(energyAboveGroundEv(2)).toBeCloseTo(10.199, 2);
    expect(energyAboveGroundEv(Infinity)).toBeCloseTo(13.598, 3);
    expect(energyAboveGroundEv(1)).toBe(0);
  });
  it('starts below the ground state only for Lyman lines', () => {
    expect(energyAxis(true).bottom).toBeLessThan(0);
    expect(energyAxis(false).bottom).toBeLessThan(energyAboveGroundEv(2));
  });
  it('draws strokes by signal-to-noise within limits', () => {
    expect([NaN, 0, 10, 100].map(transitionWidth)).toEqual([1.2, 1.2, 5, 9]);
  });
});

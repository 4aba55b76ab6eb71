import { describe, expect, it } from 'vitest';
import { shareWithinThousand, velocityBetweenKms, verdictsAgree } from './verdicts-agree';

const at = (redshift: number | null, redshiftError: number | null = 1e-5) => ({ redshift, redshiftError });

describe('verdictsAgree', () => {
  it('allows 300 km/s however small the errors are', () => {
    expect(verdictsAgree(at(0.5), at(0.5 + (1.5 * 299) / 299792.458))).toBe(true);
    expect(verdictsAgree(at(0.5), at(0.5 + (1.5 * 301) / 299792.458))).toBe(false);
  });

  it('allows three combined errors where those are larger', () => {
    // 3 x sqrt(2) x 0.001 / 1.5 x c = 848 km/s
    expect(verdictsAgree(at(0.5, 1e-3), at(0.504, 1e-3))).toBe(true);
    expect(verdictsAgree(at(0.5, 1e-3), at(0.505, 1e-3))).toBe(false);
  });

  it('takes two of one kind only', () => {
    expect(verdictsAgree(at(null), at(null))).toBe(true);
    expect(verdictsAgree(at(null), at(0))).toBe(false);
  });

  it('does not mind who comes first, nor a missing error', () => {
    expect(verdictsAgree(at(0.5, null), at(0.5003))).toBe(verdictsAgree(at(0.5003), at(0.5, null)));
  });
});

describe('shareWithinThousand', () => {
  it('counts pairs', () => {
    const near = [at(1), at(1.006)] as const;
    const far = [at(1), at(1.007)] as const;
    expect(velocityBetweenKms(1, 1.006)).toBeLessThan(1000);
    expect(shareWithinThousand([near, far, [at(null), at(null)], [at(null), at(1)]])).toBe(0.5);
    expect(shareWithinThousand([])).toBeNaN();
  });
});

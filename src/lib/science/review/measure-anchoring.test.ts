import { describe, expect, it } from 'vitest';
import { measureAnchoring, type AnchoredLook } from './measure-anchoring';

let at = 0;
const look = (spectrumId: string, redshift: number | null, more: Partial<AnchoredLook> = {}): AnchoredLook => ({
  ...{ id: String(++at).padStart(4, '0'), spectrumId, userId: 'a', redshift, redshiftError: null, withdrawn: false },
  ...{ word: 0, seconds: null, seenOthers: false, engineHidden: false, engineRedshift: 0.5 },
  ...more,
});
const hidden = { engineHidden: true };

describe('measureAnchoring', () => {
  it('counts agreement within 1,000 km/s, or that neither has a redshift, shown against hidden', () => {
    const {
      shown,
      hidden: blind,
      difference,
    } = measureAnchoring([
      look('s1', 0.5),
      look('s2', 0.503),
      look('s3', null, { engineRedshift: null }),
      look('s4', 0.9, { engineHidden: null }),
      look('s5', 0.5, hidden),
      look('s6', 0.9, hidden),
    ]);
    expect([shown.agree, shown.looks, blind.agree, blind.looks]).toEqual([3, 4, 1, 2]);
    expect(difference?.difference).toBeCloseTo(0.25, 12);
  });

  it('takes the first word of a hidden look, whatever was said once the answer showed', () => {
    const rows = [look('s', 0.9, hidden), look('s', 0.5)];
    expect(measureAnchoring(rows)).toMatchObject({ shown: { looks: 0 }, hidden: { looks: 1, agree: 0 } });
  });

  it('leaves out a hidden look that was taken back at once, and whoever ruled', () => {
    const taken = [look('s', 0.9, hidden), look('s', null, { withdrawn: true }), look('s', 0.5)];
    expect(measureAnchoring(taken)).toMatchObject({ shown: { looks: 0 }, hidden: { looks: 0, share: null } });
    expect(measureAnchoring([look('t', 0.5)], new Set(['t a'])).shown.looks).toBe(0);
  });
});

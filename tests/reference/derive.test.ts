// Sources, all as gathered in data/line-physics.json, which marks each figure as seen or from memory: Storey & Hummer (1995, MNRAS 272,
// 41) case B; Kewley et al. (2001, ApJ 556, 121) eq. 5; Kauffmann et al. (2003, MNRAS 346, 1055) eq. 1; Kennicutt (1998, ARA&A 36, 189)
// eq. 2; Kennicutt & Evans (2012, ARA&A 50, 531) table 1. Domínguez et al. (2013, ApJ 763, 145) eq. 4 is from memory.
import { describe, expect, it } from 'vitest';
import { CASE_B, colourExcessFromDecrement } from '$lib/science/derive/dust-from-balmer';
import { starburstLimit, starFormingLimit } from '$lib/science/derive/ionisation-class';
import { starFormationRate, starFormationRateSalpeter } from '$lib/science/derive/star-formation';
import reference from './data/line-physics.json';

describe('case B', () => {
  it('takes the ratios of Storey & Hummer (1995) at 10,000 K and 100 cm-3', () => {
    const { Ha_Hb, Hg_Hb } = reference.lineRatios.caseB_Halpha_Hbeta.computedFromSH95.at1e4K_100;
    expect(Math.abs(CASE_B.halpha - Ha_Hb)).toBeLessThan(0.001);
    expect(Math.abs(CASE_B.hgamma - Hg_Hb)).toBeLessThan(0.0001);
  });
});

describe('Balmer decrement to E(B-V)', () => {
  it('is 1.97 log10(decrement / 2.86) with the law of Calzetti et al. (2000): Domínguez et al. (2013) eq. 4', () => {
    for (const decrement of [3, 4, 6]) {
      const { value } = colourExcessFromDecrement({ value: decrement, error: 0 }, 2.86, 'calzetti-2000');
      expect(Math.abs(value / (1.97 * Math.log10(decrement / 2.86)) - 1)).toBeLessThan(0.01);
    }
  });

  it('is 0 for the intrinsic ratio and below it negative', () => {
    expect(colourExcessFromDecrement({ value: CASE_B.halpha, error: 0.1 }).value).toBeCloseTo(0, 12);
    expect(colourExcessFromDecrement({ value: 2.7, error: 0.1 }).value).toBeLessThan(0);
  });
});

describe('curves of the ionisation diagram', () => {
  it.each(reference.bpt.testPoints)('passes the test points at x = $x', (point) => {
    expect(starburstLimit(point.x)).toBeCloseTo(point.kewley2001, 5);
    expect(starFormingLimit(point.x)).toBeCloseTo(point.kauffmann2003, 4);
  });
});

describe('star-formation rate from H-alpha', () => {
  it('is 1 solar mass a year at log L = 41.27 (Kennicutt & Evans 2012, table 1)', () => {
    expect(starFormationRate(10 ** 41.27)).toBeCloseTo(1, 9);
  });

  it('stands to the Salpeter calibration of Kennicutt (1998) as 1 to 1.471', () => {
    expect(starFormationRateSalpeter(1e41) / starFormationRate(1e41)).toBeCloseTo(
      reference.sfr.check.ratioK98toKE12,
      3,
    );
    expect(starFormationRateSalpeter(1e42)).toBeCloseTo(7.9, 9);
  });
});

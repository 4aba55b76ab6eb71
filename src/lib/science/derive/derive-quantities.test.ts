import { describe, expect, it } from 'vitest';
import type { LineFit } from '$lib/domain/measurement';
import { deriveQuantities } from './derive-quantities';

const fit = (line: string, flux: number, fluxError: number): LineFit => ({
  line,
  wavelengthRest: 5000,
  wavelengthObserved: 5500,
  flux,
  fluxError,
  equivalentWidthRest: null,
  equivalentWidthRestError: null,
  fwhmKms: 150,
  fwhmKmsError: 5,
  signalToNoise: flux / fluxError,
});

const starburst = [
  fit('H-alpha 6565', 40, 0.4),
  fit('H-beta 4863', 10, 0.2),
  fit('[N II] 6585', 8, 0.4),
  fit('[O III] 5008', 15, 0.3),
];

describe('deriveQuantities', () => {
  it('gives decrement, reddening, class and rate of a star-forming galaxy', () => {
    const derived = deriveQuantities(starburst, 0.1, 1e-17);
    expect(derived.balmerDecrement).toBeCloseTo(4, 9);
    expect(derived.balmerDecrementError).toBeCloseTo(4 * Math.hypot(0.01, 0.02), 6);
    // k(H-beta) - k(H-alpha) of Cardelli et al. (1989), R_V = 3.1, is 1.07: 2.5 / 1.07 log10(4 / 2.863) = 0.338
    expect(derived.colourExcess).toBeCloseTo(0.338, 2);
    expect(derived.ionisationClass).toBe('star-forming');
    // 4 pi (460.3 Mpc)^2 x 4e-16 = 1.014e40 erg/s
    expect(derived.luminosities['H-alpha 6565']).toBeCloseTo(1.014e40, -37);
    const uncorrected = 1.014e40 * 10 ** -41.27;
    expect(derived.starFormationRate! / uncorrected).toBeCloseTo(10 ** (0.4 * 2.535 * 0.338), 1);
  });

  it('propagates errors as random trials do', () => {
    const derived = deriveQuantities(starburst, 0.1, 1e-17);
    // small relative errors: ln L = ln Fa + k_a / (k_b - k_a) (ln Fa - ln Fb)
    const slope = 2.535 / 1.073;
    const expected = Math.hypot((1 + slope) * 0.01, slope * 0.02);
    expect(derived.starFormationRateError! / derived.starFormationRate! / expected).toBeCloseTo(1, 1);
  });

  it('keeps the error of the dust correction where noise puts the decrement below case B', () => {
    const share = (halpha: number) => {
      const derived = deriveQuantities([fit('H-alpha 6565', halpha, 1), fit('H-beta 4863', 10, 1)], 0.1, 1e-17);
      return derived.starFormationRateError! / derived.starFormationRate!;
    };
    expect(share(27)).toBeGreaterThan(0.8 * share(32));
    const derived = deriveQuantities([fit('H-alpha 6565', 27, 1), fit('H-beta 4863', 10, 1)], 0.1, 1e-17);
    expect(derived.starFormationRate! / (derived.luminosities['H-alpha 6565'] * 10 ** -41.27)).toBeCloseTo(1, 6);
  });

  it('leaves luminosities and rate out for relative flux, and keeps ratios', () => {
    const derived = deriveQuantities(starburst, 0.1, null);
    expect(derived.luminosities).toEqual({});
    expect(derived.starFormationRate).toBeNull();
    expect(derived.balmerDecrement).toBeCloseTo(4, 9);
  });

  it('falls back on H-gamma over H-beta where H-alpha is not covered', () => {
    const dusty = [fit('H-beta 4863', 10, 0.1), fit('H-gamma 4342', 4, 0.1)];
    const derived = deriveQuantities(dusty, 0.8, 1e-17);
    expect(derived.balmerDecrement).toBeNull();
    expect(derived.colourExcess).toBeGreaterThan(0.2);
    expect(derived.colourExcess).toBeLessThan(0.5);
    expect(derived.starFormationRate).toBeGreaterThan(0);
  });

  it('gives no star-formation rate for an active nucleus', () => {
    const active = [
      fit('H-alpha 6565', 40, 0.4),
      fit('H-beta 4863', 10, 0.2),
      fit('[N II] 6585', 35, 0.4),
      fit('[O III] 5008', 90, 0.3),
    ];
    const derived = deriveQuantities(active, 0.1, 1e-17);
    expect(derived.ionisationClass).toBe('active nucleus');
    expect(derived.starFormationRate).toBeNull();
  });

  it('says nothing from lines that are not seen, and never NaN', () => {
    const faint = [fit('H-alpha 6565', 1, 1), fit('H-beta 4863', -0.5, 1)];
    for (const redshift of [0.1, 0, -0.001]) {
      const derived = deriveQuantities(faint, redshift, 1e-17);
      expect(derived.colourExcess).toBeNull();
      expect(derived.starFormationRate).toBeNull();
      expect(JSON.stringify(derived)).not.toContain('NaN');
    }
  });
});

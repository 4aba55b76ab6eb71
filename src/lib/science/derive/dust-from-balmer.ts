import { extinctionRelativeToV, USUAL_RV, type ExtinctionLaw } from '$lib/science/constants/extinction';

/** A number with its standard error. */
export interface Measured {
  value: number;
  error: number;
}

/** Case B recombination at 10,000 K and 100 cm-3 relative to H-beta (Storey & Hummer 1995, MNRAS 272, 41). */
export const CASE_B = { halpha: 2.863, hgamma: 0.4683 } as const;

/** H-alpha over H-beta usually taken in active nuclei, where collisions add to H-alpha (Osterbrock & Ferland 2006, chapter 14; from memory). */
export const ACTIVE_NUCLEUS_DECREMENT = 3.1;

const HALPHA = 6564.61;
const HBETA = 4862.68;

/** k(lambda) = A(lambda) / E(B-V) of a law with its usual R_V. */
export function attenuationPerColourExcess(wavelengthAngstrom: number, law: ExtinctionLaw): number {
  return USUAL_RV[law] * extinctionRelativeToV(wavelengthAngstrom, law);
}

/** Ratio of two independent fluxes with its error to first order; null where the lower one is not positive. */
export function fluxRatio(upper: Measured, lower: Measured): Measured | null {
  if (!(lower.value > 0) || !(upper.value > 0)) return null;
  const value = upper.value / lower.value;
  return { value, error: value * Math.hypot(upper.error / upper.value, lower.error / lower.value) };
}

/**
 * Colour excess E(B-V) of the ionised gas from a hydrogen line ratio.
 *
 * E(B-V) = 2.5 / (k(denominator) - k(numerator)) log10(observed / intrinsic). Not cut at 0: noise scatters it to both sides, and a cut
 * would bias averages; whoever corrects for dust takes max(0, E).
 *
 * @param ratio observed ratio of the fluxes
 * @param intrinsic ratio without dust
 * @param numerator, denominator rest wavelengths, ångström
 * @param law extinction law
 * @returns magnitudes
 *
 * Source: Calzetti (2001, PASP 113, 1449), eq. 4 in this form; Domínguez et al. (2013, ApJ 763, 145), eq. 4.
 *
 * @example
 * colourExcess({ value: 4, error: 0.1 }, 2.86, 6564.61, 4862.68, 'calzetti-2000').value; // 0.287
 */
export function colourExcess(
  ratio: Measured,
  intrinsic: number,
  numerator: number,
  denominator: number,
  law: ExtinctionLaw,
): Measured {
  const difference = attenuationPerColourExcess(denominator, law) - attenuationPerColourExcess(numerator, law);
  return {
    value: (2.5 / difference) * Math.log10(ratio.value / intrinsic),
    error: Math.abs((2.5 / (difference * Math.LN10)) * (ratio.error / ratio.value)),
  };
}

/** E(B-V) from the Balmer decrement H-alpha / H-beta; see {@link colourExcess}. */
export function colourExcessFromDecrement(
  decrement: Measured,
  intrinsic: number = CASE_B.halpha,
  law: ExtinctionLaw = 'cardelli-1989',
): Measured {
  return colourExcess(decrement, intrinsic, HALPHA, HBETA, law);
}

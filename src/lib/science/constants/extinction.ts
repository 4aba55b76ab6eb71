/** Published laws of extinction by dust, as A(lambda) / A(V). */
export type ExtinctionLaw = 'cardelli-1989' | 'odonnell-1994' | 'calzetti-2000';

/** R_V that each law is usually read with: 3.1 for the diffuse Galactic medium, 4.05 for starbursts (Calzetti et al. 2000, eq. 5). */
export const USUAL_RV: Record<ExtinctionLaw, number> = {
  'cardelli-1989': 3.1,
  'odonnell-1994': 3.1,
  'calzetti-2000': 4.05,
};

function polynomial(coefficients: readonly number[], y: number): number {
  let sum = 0;
  for (let i = coefficients.length - 1; i >= 0; i--) sum = sum * y + coefficients[i];
  return sum;
}

// Cardelli, Clayton & Mathis (1989, ApJ 345, 245), eq. 3a and 3b
const CARDELLI_A = [1, 0.17699, -0.50447, -0.02427, 0.72085, 0.01979, -0.7753, 0.32999];
const CARDELLI_B = [0, 1.41338, 2.28305, 1.07233, -5.38434, -0.62251, 5.3026, -2.09002];
// O'Donnell (1994, ApJ 422, 158): replaces the optical part only
const ODONNELL_A = [1, 0.104, -0.609, 0.701, 1.137, -1.718, -0.827, 1.647, -0.505];
const ODONNELL_B = [0, 1.952, 2.908, -3.989, -7.985, 11.102, 5.491, -10.805, 3.347];

function galactic(x: number, rv: number, opticalA: readonly number[], opticalB: readonly number[]): number {
  let a: number;
  let b: number;
  if (x < 1.1) {
    const power = Math.pow(x, 1.61);
    a = 0.574 * power;
    b = -0.527 * power;
  } else if (x < 3.3) {
    a = polynomial(opticalA, x - 1.82);
    b = polynomial(opticalB, x - 1.82);
  } else if (x <= 8) {
    const y = x > 5.9 ? x - 5.9 : 0;
    a = 1.752 - 0.316 * x - 0.104 / ((x - 4.67) ** 2 + 0.341) - 0.04473 * y ** 2 - 0.009779 * y ** 3;
    b = -3.09 + 1.825 * x + 1.206 / ((x - 4.62) ** 2 + 0.263) + 0.213 * y ** 2 + 0.1207 * y ** 3;
  } else {
    const y = x - 8;
    a = -1.073 - 0.628 * y + 0.137 * y ** 2 - 0.07 * y ** 3;
    b = 13.67 + 4.257 * y - 0.42 * y ** 2 + 0.374 * y ** 3;
  }
  return a + b / rv;
}

function starburst(micron: number, rv: number): number {
  // Calzetti et al. (2000, ApJ 533, 682), eq. 4; the branches do not meet exactly at 0.63 micron
  const k =
    micron < 0.63
      ? 2.659 * (-2.156 + 1.509 / micron - 0.198 / micron ** 2 + 0.011 / micron ** 3)
      : 2.659 * (-1.857 + 1.04 / micron);
  return (k + rv) / rv;
}

/**
 * Extinction at one wavelength relative to the V band.
 *
 * A(lambda) / A(V) = a(x) + b(x) / R_V with x = 1 micron / lambda for the Galactic laws, k(lambda) / R_V for the starburst law.
 *
 * @param wavelengthAngstrom rest wavelength, ångström (laws are published for air or vacuum alike; the difference is below 1e-4)
 * @param law which published law
 * @param rv ratio of total to selective extinction; the law's usual value when left out
 * @returns A(lambda) / A(V), dimensionless; never below 0
 *
 * Outside the published range (1,000 Å to 3.33 µm Galactic, 1,200 Å to 2.2 µm starburst) the nearest end is extrapolated by its
 * own formula down to 0. Throws RangeError for a wavelength or R_V that is not positive.
 *
 * Source: Cardelli, Clayton & Mathis (1989) eq. 1 to 5; O'Donnell (1994); Calzetti et al. (2000) eq. 4.
 *
 * @example
 * extinctionRelativeToV(4862.7, 'cardelli-1989'); // 1.164
 */
export function extinctionRelativeToV(wavelengthAngstrom: number, law: ExtinctionLaw, rv = USUAL_RV[law]): number {
  if (!(wavelengthAngstrom > 0) || !(rv > 0)) throw new RangeError('wavelength and R_V must be positive');
  const micron = wavelengthAngstrom / 1e4;
  if (law === 'calzetti-2000') return Math.max(0, starburst(micron, rv));
  const [a, b] = law === 'cardelli-1989' ? [CARDELLI_A, CARDELLI_B] : [ODONNELL_A, ODONNELL_B];
  return Math.max(0, galactic(1 / micron, rv, a, b));
}

/**
 * Fraction of light that passes dust of colour excess E(B-V): 10^(-0.4 E(B-V) R_V A(lambda)/A(V)).
 *
 * @param wavelengthAngstrom rest wavelength, ångström
 * @param colourExcess E(B-V), magnitudes; 0 gives exactly 1
 * @param law which published law
 * @param rv ratio of total to selective extinction
 */
export function dustTransmission(
  wavelengthAngstrom: number,
  colourExcess: number,
  law: ExtinctionLaw,
  rv = USUAL_RV[law],
): number {
  return Math.pow(10, -0.4 * colourExcess * rv * extinctionRelativeToV(wavelengthAngstrom, law, rv));
}

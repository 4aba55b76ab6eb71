import { SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';

/** Parameters of a flat universe of matter and a cosmological constant; radiation is left out (0.2 % in distance at z = 7 at most). */
export interface FlatCosmology {
  /** Hubble constant, km/s/Mpc. */
  hubbleConstant: number;
  /** Matter density over the critical one today, 0 to 1. */
  omegaMatter: number;
}

/** What derived quantities are given for unless a programme says otherwise: 70 km/s/Mpc and 0.3 (common practice, no source). */
export const USUAL_COSMOLOGY: Readonly<FlatCosmology> = Object.freeze({ hubbleConstant: 70, omegaMatter: 0.3 });

/** Hubble time of 1 km/s/Mpc in 10^9 years: Mpc in km (IAU 2015) over seconds in 10^9 Julian years. */
const HUBBLE_TIME_GYR = 3.0856775814913673e19 / (365.25 * 86400 * 1e9);

// Gauss-Legendre abscissae and weights, 12 points, positive half (Abramowitz & Stegun 1964, table 25.4)
const ABSCISSAE = [
  0.125233408511469, 0.36783149899818, 0.587317954286617, 0.769902674194305, 0.904117256370475, 0.981560634246719,
];
const WEIGHTS = [
  0.249147045813403, 0.233492536538355, 0.203167426723066, 0.160078328543346, 0.106939325995318, 0.047175336386512,
];

/** Integral over z from 0, in steps of equal ln(1 + z): two panels of 12 points give 1e-9 up to z = 20. */
function integrate(redshift: number, integrand: (z: number) => number): number {
  const panels = 2;
  const step = Math.log1p(redshift) / panels;
  let sum = 0;
  for (let panel = 0; panel < panels; panel++) {
    const middle = (panel + 0.5) * step;
    for (let k = 0; k < ABSCISSAE.length; k++) {
      for (const sign of [-1, 1]) {
        const u = middle + sign * 0.5 * step * ABSCISSAE[k];
        const scale = Math.exp(u);
        sum += WEIGHTS[k] * integrand(scale - 1) * scale;
      }
    }
  }
  return 0.5 * step * sum;
}

function expansion(redshift: number, omegaMatter: number): number {
  const scale = 1 + redshift;
  return Math.sqrt(omegaMatter * scale * scale * scale + 1 - omegaMatter);
}

function check(redshift: number, { hubbleConstant, omegaMatter }: FlatCosmology): void {
  if (!(redshift > -1)) throw new RangeError(`A redshift must be above -1, not ${redshift}.`);
  if (!(hubbleConstant > 0) || !(omegaMatter >= 0 && omegaMatter <= 1)) {
    throw new RangeError('The Hubble constant must be positive and the matter density between 0 and 1.');
  }
}

/**
 * Comoving distance along the line of sight, Mpc: c / H0 times the integral of dz / E(z), E^2 = Omega_m (1 + z)^3 + 1 - Omega_m.
 *
 * @param redshift cosmological; 0 gives 0, a negative one (blueshift) a negative distance
 * @throws RangeError for a redshift of -1 or less, or parameters out of bounds
 *
 * Source: Hogg (1999, arXiv:astro-ph/9905116), eq. 15.
 *
 * @example
 * comovingDistanceMpc(1); // 3303.8 with H0 = 70, Omega_m = 0.3
 */
export function comovingDistanceMpc(redshift: number, cosmology: FlatCosmology = USUAL_COSMOLOGY): number {
  check(redshift, cosmology);
  const integral = integrate(redshift, (z) => 1 / expansion(z, cosmology.omegaMatter));
  return (SPEED_OF_LIGHT_KMS / cosmology.hubbleConstant) * integral;
}

/** Luminosity distance, Mpc: (1 + z) times the comoving distance (Hogg 1999, eq. 21, flat). Same bounds and errors. */
export function luminosityDistanceMpc(redshift: number, cosmology: FlatCosmology = USUAL_COSMOLOGY): number {
  return (1 + redshift) * comovingDistanceMpc(redshift, cosmology);
}

/** Angular diameter distance, Mpc: comoving distance over 1 + z (Hogg 1999, eq. 18, flat). Same bounds and errors. */
export function angularDiameterDistanceMpc(redshift: number, cosmology: FlatCosmology = USUAL_COSMOLOGY): number {
  return comovingDistanceMpc(redshift, cosmology) / (1 + redshift);
}

/** Distance modulus, magnitudes: 5 log10(luminosity distance / 10 pc); -Infinity at z = 0 (Hogg 1999, eq. 25). */
export function distanceModulus(redshift: number, cosmology: FlatCosmology = USUAL_COSMOLOGY): number {
  return 5 * Math.log10(luminosityDistanceMpc(redshift, cosmology)) + 25;
}

/**
 * Comoving volume per steradian and unit redshift, Mpc^3: c / H0 D_C^2 / E(z) (Hogg 1999, eq. 28, flat). Same bounds and errors.
 */
export function volumeElementMpc3(redshift: number, cosmology: FlatCosmology = USUAL_COSMOLOGY): number {
  const distance = comovingDistanceMpc(redshift, cosmology);
  const hubbleDistance = SPEED_OF_LIGHT_KMS / cosmology.hubbleConstant;
  return (hubbleDistance * distance * distance) / expansion(redshift, cosmology.omegaMatter);
}

/** Lookback time, 10^9 years: 1 / H0 times the integral of dz / ((1 + z) E(z)) (Hogg 1999, eq. 30). Same bounds and errors. */
export function lookbackTimeGyr(redshift: number, cosmology: FlatCosmology = USUAL_COSMOLOGY): number {
  check(redshift, cosmology);
  const integral = integrate(redshift, (z) => 1 / ((1 + z) * expansion(z, cosmology.omegaMatter)));
  return (HUBBLE_TIME_GYR / cosmology.hubbleConstant) * integral;
}

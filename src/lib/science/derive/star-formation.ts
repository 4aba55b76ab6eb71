import { luminosityDistanceMpc, type FlatCosmology } from '$lib/science/cosmology/distances';

/** Square centimetres of a sphere of 1 Mpc: 4 pi (3.0856775814913673e24 cm)^2 (IAU 2015 Resolution B2). */
const SPHERE_OF_A_MEGAPARSEC_CM2 = 4 * Math.PI * 3.0856775814913673e24 ** 2;

/**
 * Luminosity, erg/s, of a flux in erg/s/cm2: 4 pi D_L^2 F.
 *
 * @returns null for a redshift that has no distance (0 or below)
 */
export function luminosity(fluxCgs: number, redshift: number, cosmology: FlatCosmology): number | null {
  if (!(redshift > 0)) return null;
  return fluxCgs * SPHERE_OF_A_MEGAPARSEC_CM2 * luminosityDistanceMpc(redshift, cosmology) ** 2;
}

/**
 * Star-formation rate, solar masses a year, from the dust-corrected luminosity of H-alpha in erg/s: log SFR = log L - 41.27.
 *
 * Source: Kennicutt & Evans (2012, ARA&A 50, 531), eq. 12 and table 1 (Hao et al. 2011, Murphy et al. 2011), Kroupa IMF.
 */
export function starFormationRate(halphaLuminosity: number): number {
  return halphaLuminosity * Math.pow(10, -41.27);
}

/** The older calibration, 7.9e-42 L(H-alpha), Salpeter IMF 0.1 to 100 solar masses: Kennicutt (1998, ARA&A 36, 189), eq. 2. */
export function starFormationRateSalpeter(halphaLuminosity: number): number {
  return 7.9e-42 * halphaLuminosity;
}

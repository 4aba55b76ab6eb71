/** Below this wavelength, ångström, air wavelengths are not in use: the trade gives vacuum ones (IAU 1957 convention). */
export const SHORTEST_AIR_ANGSTROM = 2000;

/**
 * Refractive index of standard air (15 C, 101325 Pa, dry, 450 ppm CO2) at a vacuum wavelength.
 *
 * n - 1 = 1e-8 [5792105 / (238.0185 - s²) + 167917 / (57.362 - s²)], s = 1 / wavelength in 1/µm
 *
 * Source: Ciddor (1996, Applied Optics 35, 1566), equation 1.
 *
 * @param vacuumAngstrom vacuum wavelength, ångström
 */
export function refractiveIndex(vacuumAngstrom: number): number {
  const squared = (1e4 / vacuumAngstrom) ** 2;
  return 1 + 1e-8 * (5792105 / (238.0185 - squared) + 167917 / (57.362 - squared));
}

/**
 * Air wavelength of a vacuum one, both in ångström; unchanged below 2000 Å.
 *
 * Source: Ciddor (1996), by `refractiveIndex`.
 */
export function vacuumToAir(vacuumAngstrom: number): number {
  return vacuumAngstrom < SHORTEST_AIR_ANGSTROM ? vacuumAngstrom : vacuumAngstrom / refractiveIndex(vacuumAngstrom);
}

/**
 * Vacuum wavelength of an air one, both in ångström; unchanged below 2000 Å. Solved by repeated substitution, which
 * gains four digits a step, so that both ways agree to 1e-12.
 *
 * Source: Ciddor (1996), by `refractiveIndex`.
 */
export function airToVacuum(airAngstrom: number): number {
  if (airAngstrom < SHORTEST_AIR_ANGSTROM) return airAngstrom;
  let vacuum = airAngstrom;
  for (let step = 0; step < 4; step++) vacuum = airAngstrom * refractiveIndex(vacuum);
  return vacuum;
}

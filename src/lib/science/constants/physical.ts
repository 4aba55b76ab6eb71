/**
 * Physical constants, each with its source and year. Exact ones are defined by the SI (2019); the others are
 * CODATA 2018 (Tiesinga et al. 2021, Rev. Mod. Phys. 93, 025010).
 */

/** Speed of light in vacuum, km/s (SI, exact). */
export const SPEED_OF_LIGHT_KMS = 299792.458;

/** Planck constant, J s (SI 2019, exact). */
export const PLANCK_JOULE_SECOND = 6.62607015e-34;

/** Elementary charge, C (SI 2019, exact); also the joules in one electronvolt. */
export const ELECTRONVOLT_JOULE = 1.602176634e-19;

/** h c in eV ångström, so that a photon of wavelength w (vacuum ångström) carries HC_EV_ANGSTROM / w electronvolts. */
export const HC_EV_ANGSTROM = (PLANCK_JOULE_SECOND * SPEED_OF_LIGHT_KMS * 1e3 * 1e10) / ELECTRONVOLT_JOULE;

/** Rydberg constant for infinite nuclear mass, 1/m (CODATA 2018). */
export const RYDBERG_INFINITY_PER_METRE = 10973731.56816;

/** Electron-proton mass ratio (CODATA 2018). */
export const ELECTRON_PROTON_MASS_RATIO = 5.44617021487e-4;

/** Rydberg constant of hydrogen from its reduced mass, 1/m: R_inf / (1 + m_e/m_p). */
export const RYDBERG_HYDROGEN_PER_METRE = RYDBERG_INFINITY_PER_METRE / (1 + ELECTRON_PROTON_MASS_RATIO);

/** FWHM of a Gaussian in units of its sigma, 2 sqrt(2 ln 2). */
export const FWHM_PER_SIGMA = 2 * Math.sqrt(2 * Math.LN2);

/**
 * Strong night-sky emission lines whose subtraction leaves residuals everywhere, vacuum ångström in the observatory's
 * frame. The many OH lines are recognised by the noise they raise and need no list here.
 * Source: [O I] from the NIST ASD; Na D and Hg from the NIST ASD (lamps and the mesosphere), wavelengths from memory.
 */
export const STRONG_SKY_LINES: readonly number[] = [
  4047.71, 4359.56, 5462.27, 5578.887, 5891.583, 5897.558, 6302.046, 6365.536,
];

/**
 * Bands of telluric absorption that uncorrected spectra show, vacuum ångström in the observatory's frame: O2 B and A,
 * and H2O and CO2 bands. Common practice, no single source.
 */
export const TELLURIC_BANDS: readonly (readonly [number, number])[] = [
  [6864, 6965],
  [7160, 7345],
  [7590, 7715],
  [8130, 8370],
  [8920, 9200],
  [9280, 9860],
  [10900, 11700],
  [13300, 15100],
  [17800, 20900],
];

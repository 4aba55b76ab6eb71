import { trueMinus } from './true-minus';

/** ICRS right ascension or declination in degrees, to five decimals (0.04 arcsec); `not known` for null. */
export function degreesText(degrees: number | null): string {
  return degrees === null || !Number.isFinite(degrees) ? 'not known' : trueMinus(degrees.toFixed(5));
}

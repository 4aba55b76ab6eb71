import type { StarKind } from './recipe';

/** Absorption feature: vacuum ångström, rest equivalent width in ångström at unit strength, own sigma in ångström. */
export type Feature = readonly [wavelength: number, equivalentWidth: number, sigma: number];

/**
 * Metal features of old starlight. Positions of Ca H and K, Mg b, Na D and the Ca triplet from the NIST ASD; the broad ones at
 * the centres of the Lick indices (Worthey et al. 1994, ApJS 94, 687), all from memory; strengths like a giant elliptical's.
 */
export const METAL_FEATURES: readonly Feature[] = [
  [3934.78, 8, 6],
  [3969.59, 6.5, 6],
  [3735, 4, 12],
  [3832, 4.5, 9],
  [4160, 2.2, 12],
  [4228, 1.2, 4],
  [4305.5, 5.5, 9],
  [4384, 4, 10],
  [4456, 1.6, 5],
  [4532, 2.8, 9],
  [4669, 2, 12],
  [5016, 3, 12],
  [5168.8, 1.6, 2.5],
  [5174.1, 2, 2.5],
  [5185, 2.2, 2.5],
  [5271, 2.9, 7],
  [5330, 2.5, 7],
  [5406, 1.7, 6],
  [5710, 0.9, 5],
  [5783, 0.8, 5],
  [5891.58, 2.4, 2],
  [5897.56, 1.9, 2],
  [6497, 1, 6],
  [8185.5, 0.5, 2.5],
  [8197, 0.7, 2.5],
  [8500.36, 1.4, 2],
  [8544.44, 3.6, 2.3],
  [8664.52, 2.9, 2.3],
  [11690, 1, 5],
  [15900, 2, 8],
  [22063, 3.5, 14],
  [22630, 3, 14],
];

/** Balmer and Paschen absorption relative to H-beta's equivalent width. */
export const HYDROGEN_FEATURES: readonly (readonly [wavelength: number, relative: number])[] = [
  [6564.62, 0.7],
  [4862.69, 1],
  [4341.69, 1],
  [4102.9, 1.05],
  [3971.2, 0.95],
  [3890.16, 0.85],
  [3836.48, 0.75],
  [3798.98, 0.6],
  [3771.7, 0.45],
  [8600.8, 0.4],
  [8665, 0.45],
  [8752.9, 0.45],
  [8865.3, 0.5],
  [9017.8, 0.5],
  [9232.2, 0.6],
  [10052.1, 0.6],
  [10941.1, 0.7],
  [12821.6, 0.7],
];

/** Heads of TiO bands that shade to the red, vacuum ångström, depth in a mid M dwarf (from memory of published M-dwarf spectra). */
export const TITANIUM_OXIDE_HEADS: readonly (readonly [wavelength: number, depth: number, reach: number])[] = [
  [4763, 0.2, 60],
  [4956, 0.3, 80],
  [5169, 0.35, 80],
  [5450, 0.35, 90],
  [5849, 0.3, 100],
  [6160, 0.4, 120],
  [6653, 0.35, 110],
  [7056, 0.45, 130],
  [7591, 0.4, 120],
  [8434, 0.35, 90],
  [8861, 0.25, 90],
];

/** Helium lines of a hot subdwarf, vacuum ångström and equivalent width. */
export const HELIUM_FEATURES: readonly Feature[] = [
  [4027.3, 1.2, 3],
  [4472.7, 1.4, 3],
  [4686.9, 0.9, 3],
  [4923.3, 0.7, 2.5],
  [5017.1, 0.5, 2.5],
  [5877.2, 1, 2.5],
  [6680, 0.8, 2.5],
];

/** What sets one kind of star off from another: temperature range, Balmer equivalent width, wing sigma in ångström, metals, TiO. */
export const STARS: Record<
  StarKind,
  { temperature: [number, number]; balmer: number; wing: number; metals: number; titaniumOxide: number; helium: number }
> = {
  A: { temperature: [7500, 10500], balmer: 11, wing: 16, metals: 0.08, titaniumOxide: 0, helium: 0 },
  F: { temperature: [6000, 7300], balmer: 5, wing: 9, metals: 0.3, titaniumOxide: 0, helium: 0 },
  G: { temperature: [5200, 6000], balmer: 2.5, wing: 4, metals: 0.7, titaniumOxide: 0, helium: 0 },
  K: { temperature: [3900, 5200], balmer: 0.8, wing: 2, metals: 1.2, titaniumOxide: 0.1, helium: 0 },
  M: { temperature: [2700, 3800], balmer: 0, wing: 2, metals: 1, titaniumOxide: 1, helium: 0 },
  'M emission': { temperature: [2700, 3500], balmer: 0, wing: 2, metals: 1, titaniumOxide: 1.1, helium: 0 },
  'white dwarf': { temperature: [9000, 25000], balmer: 28, wing: 40, metals: 0, titaniumOxide: 0, helium: 0 },
  'hot subdwarf': { temperature: [25000, 35000], balmer: 5, wing: 9, metals: 0, titaniumOxide: 0, helium: 1 },
};

import type { ExtinctionLaw } from '$lib/science/constants/extinction';

/** What kind of light a simulated spectrum holds. */
export const SPECTRUM_CLASSES = [
  'star-forming',
  'precision',
  'active nucleus',
  'shock-like',
  'lyman-alpha emitter',
  'quasar',
  'faint lines',
  'single line',
  'passive',
  'star',
  'empty sky',
  'pure noise',
  'featureless continuum',
  'two redshifts',
] as const;
export type SpectrumClass = (typeof SPECTRUM_CLASSES)[number];

/** One emission line of an object; strengths are relative within the object. */
export interface LineRecipe {
  /** Ion and vacuum wavelength, as in `[O III] 5008`. */
  line: string;
  /** Vacuum ångström. */
  wavelengthRest: number;
  strength: number;
  broad: boolean;
  /**
   * Intrinsic profile as a sum of Gaussians: weight (sum 1), velocity from the systemic redshift and dispersion, km/s. Any shape can
   * be written so, and its convolution with the line-spread function and integral over pixels stay exact.
   */
  profile: { weight: number; velocityKms: number; sigmaKms: number }[];
}

/** Continuum before the instrument. */
export interface ContinuumRecipe {
  kind: 'none' | 'young' | 'old' | 'quasar' | 'ultraviolet' | 'star' | 'featureless';
  /** Power-law index of f_lambda, or the temperature in kelvin of a star. */
  slope: number;
  temperatureKelvin: number;
  /** Share of old starlight at 5500 Å, 0 to 1. */
  oldFraction: number;
  /** Step at 4000 Å (ratio of red to blue). */
  breakRatio: number;
  /** Dispersion of absorption features, km/s. */
  dispersionKms: number;
  /** Rest equivalent width of H-beta in absorption, ångström, positive. */
  balmerAbsorptionAngstrom: number;
  /** Multiplies the equivalent widths of metal features. */
  metalStrength: number;
  star: StarKind | null;
  /** Colour excess of the starlight, magnitudes. */
  colourExcess: number;
  /** Seed of the intergalactic absorbers and of the wiggles of a featureless continuum. */
  detailSeed: number;
}

export const STAR_KINDS = ['A', 'F', 'G', 'K', 'M', 'M emission', 'white dwarf', 'hot subdwarf'] as const;
export type StarKind = (typeof STAR_KINDS)[number];

export interface ObjectRecipe {
  /** Systemic redshift; the radial velocity over c of a star. */
  redshift: number;
  lines: LineRecipe[];
  continuum: ContinuumRecipe;
  /** Rest equivalent width, ångström, of the anchor line; ties the continuum to the lines. */
  equivalentWidthRest: number;
  /** Name of the line that the equivalent width is given for; null without lines. */
  anchor: string | null;
  dust: { law: ExtinctionLaw; colourExcess: number };
}

/** One arm of a spectrograph. Wavelengths vacuum ångström in the observatory's frame. */
export interface ArmRecipe {
  start: number;
  end: number;
  axis: 'linear' | 'log';
  /** Resolving power lambda / FWHM in mid arm. */
  resolvingPower: number;
  /** True where the FWHM is constant in ångström (grating), else in velocity. */
  constantFwhm: boolean;
  pixelsPerFwhm: number;
}

export interface NoiseRecipe {
  /** Standard deviation between sky lines per 1 Å, 1e-17 erg/s/cm2/Å. */
  level: number;
  /** How steeply noise rises to the ends of an arm, 0 to 1. */
  endRise: number;
  /** Brightness of night-sky lines against the sky continuum; 0 leaves them out. */
  skyLines: number;
  /** Share of the sky lines left after subtraction, and their shift in pixels. */
  skyResidual: number;
  skyShiftPixels: number;
  /** 0: none; telluric absorption of this strength left in the spectrum. */
  telluric: number;
  /** Resampled by linear interpolation onto a shifted grid, which correlates neighbouring pixels. */
  resampled: boolean;
  /** Declared standard deviation over the true one. */
  declaredErrorFactor: number;
  /** Unmasked cosmic-ray hits. */
  cosmicRays: number;
  /** Runs of bad pixels. */
  badRuns: number;
  /** True LSF sigma over the declared one. */
  lsfError: number;
}

/** Everything that defines a simulated spectrum but its noise. */
export interface Recipe {
  name: string;
  class: SpectrumClass;
  objects: ObjectRecipe[];
  arms: ArmRecipe[];
  noise: NoiseRecipe;
  /** Signal-to-noise ratio that the best line is scaled to; for spectra without lines, of the continuum per pixel. */
  signalToNoise: number;
  /** Second object's best line over the first one's. */
  secondRatio: number;
  /** Barycentric velocity in km/s: sky and detector stand in the observatory's frame. */
  barycentricKms: number;
}

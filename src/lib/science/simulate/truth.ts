import type { SpectrumClass } from './recipe';

/** What was put into a line. Flux in the spectrum's flux unit times ångström. */
export interface TruthLine {
  line: string;
  wavelengthRest: number;
  /** Vacuum ångström, barycentric, of the profile's mean. */
  wavelengthObserved: number;
  flux: number;
  /** Matched-filter signal-to-noise ratio with the true profile and the true noise. */
  signalToNoise: number;
  /** Intrinsic FWHM, km/s. */
  fwhmKms: number;
  /** Rest equivalent width, ångström; null where there is no continuum. */
  equivalentWidthRest: number | null;
  broad: boolean;
  /** Share of the flux that falls on usable pixels. */
  coverage: number;
  /** Share of that which the atmosphere lets pass; 1 where telluric absorption was left out. */
  transmission: number;
  /** 0 for the main object, 1 for the second. */
  object: number;
}

/** The known answer of a simulated spectrum. */
export interface Truth {
  class: SpectrumClass;
  /** Redshift of the main object; for Lyman-alpha emitters of the line's peak as seen through the instrument; null where there is none. */
  redshift: number | null;
  redshiftSystemic: number | null;
  secondRedshift: number | null;
  /** Redshift known only through broad lines or absorption, so that a wider tolerance holds. */
  broad: boolean;
  lyman: boolean;
  hasEmission: boolean;
  lines: TruthLine[];
  bestSignalToNoise: number;
  /** Distinct features (blended doublets are one) of S/N >= 4. */
  featuresOverFour: number;
  /** Best feature >= 7, or two of >= 4. */
  detectable: boolean;
  /** Cramér-Rao bound of the redshift's standard error, where it has meaning (white noise, narrow lines), else null. */
  redshiftBound: number | null;
  /** Declared over true standard deviation. */
  declaredErrorFactor: number;
  /** What was put in besides white noise. */
  artefacts: string[];
}

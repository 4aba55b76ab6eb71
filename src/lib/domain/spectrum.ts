/** The medium in which wavelengths are given. */
export type Medium = 'vacuum' | 'air';

/** Bits of `Spectrum.mask`: why a pixel is unusable or doubtful. */
export const MASK = {
  notFinite: 1,
  noVariance: 2,
  fileMask: 4,
  badRegion: 8,
  cosmicRay: 16,
  skyLine: 32,
  telluric: 64,
  edge: 128,
} as const;

/** What is known of where, when and in which frame the spectrum was taken, as the file says it. */
export interface RawFrame {
  medium: Medium | null;
  /** FITS SPECSYS in upper case, e.g. `TOPOCENT`, `BARYCENT`, `HELIOCEN`; null where the file is silent. */
  specsys: string | null;
  /** Mid-exposure, UTC, as Julian date (UTC scale); null where unknown. */
  midExposureJulianDateUtc: number | null;
  /** Geocentric ITRS position of the telescope, metres (FITS OBSGEO-X, -Y, -Z). */
  observatoryMetres: [number, number, number] | null;
  /** True where the file gave no wavelength unit and ångström was read into it. */
  wavelengthUnitAssumed?: boolean;
}

/** What one spectrum in a file says, in its own units and frame, in the file's own pixel order. */
export interface RawSpectrum {
  /** HDU counted from 0; 0 for text files. */
  extension: number;
  /** Row counted from 1 (row of a stack or of a table with one spectrum a row). */
  row: number;
  name: string | null;
  /** ICRS degrees. */
  raDegrees: number | null;
  decDegrees: number | null;
  exposureSeconds: number | null;
  /** Pixel centres in `wavelengthUnit`. */
  wavelength: Float64Array;
  /** Scale to ångström, so that wavelength * wavelengthScaleAngstrom is in ångström (logarithms already undone). */
  wavelengthScaleAngstrom: number;
  flux: Float64Array;
  /** As the file gives it, in CGS words where recognised, e.g. `1e-17 erg s-1 cm-2 Angstrom-1`; null where none. */
  fluxUnit: string | null;
  /** Variance in fluxUnit squared; null where the file has none. Infinity marks an unusable pixel. */
  variance: Float64Array | null;
  sky: Float64Array | null;
  /** True where the file's own mask calls the pixel bad. */
  bad: Uint8Array | null;
  /** Resolving power lambda / FWHM from the file, or null. */
  resolvingPower: number | null;
  /** LSF sigma per pixel in ångström from the file, or null. */
  lsfSigmaAngstrom: Float64Array | null;
  frame: RawFrame;
  /** Header cards kept for people to read. */
  header: Record<string, string | number | boolean>;
  /** Things that were odd but not fatal. */
  warnings: string[];
}

/** What the engine reads: vacuum, barycentric ångström, increasing. All arrays have one value a pixel. */
export interface Spectrum {
  name: string | null;
  /** Pixel centres, vacuum ångström, barycentric, strictly increasing. */
  wavelength: Float64Array;
  /** Pixel edges, n + 1 values, same frame. */
  edges: Float64Array;
  flux: Float64Array;
  /** Variance of flux; Infinity = unusable pixel. */
  variance: Float64Array;
  /** False when the file gave no variance and the engine must estimate it. */
  varianceKnown: boolean;
  sky: Float64Array | null;
  /** Bits of MASK. */
  mask: Uint16Array;
  /** Sigma of the Gaussian line-spread function, ångström. */
  lsfSigma: Float64Array;
  lsfSource: 'file' | 'instrument' | 'sky lines' | 'assumed';
  /** Multiply a wavelength here by this to get the vacuum wavelength in the observatory's frame. */
  observerFactor: number;
  /** Velocity added to make the spectrum barycentric, km/s, or null where none was applied. */
  barycentricKms: number | null;
  medium: Medium | null;
  specsys: string | null;
  fluxUnit: string | null;
  /** Power-of-ten times 1 erg/s/cm2/Å; null for relative flux or counts, which switches luminosities off. */
  fluxScaleCgs: number | null;
  /** True when medium or frame had to be assumed: the measurement then carries the flag `wavelength doubt`. */
  wavelengthDoubt: boolean;
  warnings: string[];
}

import type { Problem } from './problem';

/** What is kept in a row about a spectrum; its pixels stay in storage. */
export interface SpectrumSummary {
  extension: number;
  row: number;
  name: string | null;
  raDegrees: number | null;
  decDegrees: number | null;
  exposureSeconds: number | null;
  pixelCount: number;
  /** Vacuum, barycentric ångström. */
  wavelengthMin: number;
  wavelengthMax: number;
  medianSignalToNoise: number | null;
  /** Mid-exposure, ISO 8601 UTC; left out or null where the file does not say. */
  midExposure?: string | null;
  /** Start and end of the exposure or of all that went into a stack, ISO 8601 UTC; left out or null where not known. */
  exposureStart?: string | null;
  exposureEnd?: string | null;
  /** Zero point of the wavelength scale by the sky's own lines, km/s; null without a sky spectrum that shows them. */
  skyOffsetKms?: number | null;
  /** Robust scatter of one sky line's offset, km/s. */
  skyScatterKms?: number | null;
  header: Record<string, string | number | boolean>;
  warnings: string[];
}

/** What reading a file brought: spectra, and what is wrong in it. */
export interface FileContent {
  spectra: SpectrumSummary[];
  problems: Problem[];
  /** Set where a person must say what its columns are: SHA-256 of their names, which files of one kind share. */
  shape?: string;
}

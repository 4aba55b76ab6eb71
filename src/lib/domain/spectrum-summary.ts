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
  header: Record<string, string | number | boolean>;
  warnings: string[];
}

/** What reading a file brought: spectra, and what is wrong in it. */
export interface FileContent {
  spectra: SpectrumSummary[];
  problems: Problem[];
}

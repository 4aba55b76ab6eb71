import type { Confidence } from './confidence';
import type { Flag } from './flag';
import type { Measurement } from './measurement';
import type { Problem } from './problem';
import type { Unpacked } from './upload';

/** A whole picture of a night at one revision; sent as it is by the API and by server-sent events. */
export interface NightSnapshot {
  id: string;
  civilDate: string;
  notes: string;
  revision: number;
  programme: { id: string; slug: string; name: string; isDemo: boolean };
  files: { total: number; waiting: number; read: number; failed: number };
  spectra: { total: number; waiting: number; measured: number; failed: number };
  confidence: Record<Confidence, number>;
  /** Files that were announced and have not come: a night left half-submitted. `first` names a few, `by` who told. */
  missing: { files: number; bytes: number; latest: string | null; by: string | null; first: string[] };
  /** Archives handed in, latest first, at most 20. */
  archives: { id: string; name: string; state: 'unpacking' | 'done' | 'failed'; unpacked: Unpacked | null }[];
  /** True when nothing of the night waits for a worker. */
  done: boolean;
  problems: (Problem & { file: string; fileId: string })[];
  maySubmit: boolean;
  mayJudge: boolean;
}

/** One row of a night's table: the keys of `measure`, and where the spectrum came from. */
export interface NightMeasurement {
  spectrum: string;
  source: string;
  extension: number;
  row: number;
  name: string | null;
  ra: number | null;
  dec: number | null;
  /** Id of the target, the place on the sky. */
  target: string | null;
  /** As the newest target list has it; null where it stands on none. */
  magnitude: number | null;
  magnitudeBand: string | null;
  priority: number | null;
  exposureSeconds: number | null;
  state: 'waiting' | 'measured' | 'failed';
  medianSignalToNoise: number | null;
  /** Mid-exposure, ISO 8601 UTC. */
  midExposure: string | null;
  /** Zero point by the sky's own lines, and the scatter of one line, km/s; null without a sky spectrum. */
  skyOffsetKms: number | null;
  skyScatterKms: number | null;
  redshift: number | null;
  redshiftError: number | null;
  redshiftErrorMeasured: number | null;
  redshiftSystemic: number | null;
  secondRedshift: number | null;
  probability: number | null;
  confidence: Confidence | null;
  objectClass: string | null;
  fluxUnit: string | null;
  flags: Flag[];
  noiseFactor: number | null;
  strongestLine: { line: string; signalToNoise: number } | null;
  verdict: { redshift: number | null; confidence: string | null; by: string; own: boolean } | null;
  /** True where the reader looks without the engine's answer: all of it is null until their verdict. */
  answerHidden?: true;
}

/** What the engine said beyond the table's columns. */
export type FullAnswer = Pick<
  Measurement,
  'candidates' | 'lines' | 'rivals' | 'derived' | 'reasons' | 'frame' | 'engine'
>;

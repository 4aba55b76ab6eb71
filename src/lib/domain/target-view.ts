import type { Confidence } from './confidence';
import type { Flag } from './flag';
import type { Problem } from './problem';

/** What kind of spectrum it is: a single exposure, a stack of some, or a combination that the installation made. */
export type SpectrumKind = 'exposure' | 'stack' | 'combination';

/** A spectrum of a target, as its page shows it. */
export interface TargetSpectrum {
  id: string;
  /** Name in the file's header. */
  name: string | null;
  file: string;
  kind: SpectrumKind;
  state: 'waiting' | 'measured' | 'failed';
  nightId: string;
  civilDate: string;
  midExposure: string | null;
  exposureSeconds: number | null;
  medianSignalToNoise: number | null;
  redshift: number | null;
  redshiftError: number | null;
  probability: number | null;
  confidence: Confidence | null;
  objectClass: string | null;
  flags: Flag[];
  /** The newer reduction that stands in its place. */
  supersededBy: string | null;
  positionDoubt: Problem | null;
  /** Ids of the spectra whose photons are in it. */
  parts: string[];
  /** Verdicts that stand, for whoever may see them; null where looks are blind. */
  verdicts: { by: string; redshift: number | null; confidence: Confidence | null; isOwn: boolean }[] | null;
}

/** A row of a target list, as the target's page shows it. */
export interface TargetEntry {
  list: string;
  row: number;
  name: string;
  raDegrees: number | null;
  decDegrees: number | null;
  priority: number | null;
  magnitudes: Record<string, number>;
}

export interface TargetView {
  id: string;
  name: string;
  raDegrees: number | null;
  decDegrees: number | null;
  priority: number | null;
  isListed: boolean;
  programme: { id: string; slug: string; name: string };
  /** All names of the place, the target's own left out. */
  otherNames: string[];
  entries: TargetEntry[];
  /** In the order of nights; combinations last. */
  spectra: TargetSpectrum[];
  /** The engine's answers are kept back: the reader is to look at one of the spectra without them first. */
  answersHidden: boolean;
  mayCombine: boolean;
}

/** A target in a programme's table. */
export interface TargetInTable {
  id: string;
  name: string;
  raDegrees: number | null;
  decDegrees: number | null;
  priority: number | null;
  isListed: boolean;
  magnitude: number | null;
  magnitudeBand: string | null;
  /** Spectra that no newer reduction replaces. */
  spectra: number;
  nights: number;
  /** Spectra whose header puts it elsewhere. */
  doubts: number;
}

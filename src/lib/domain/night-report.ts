import type { Confidence } from './confidence';
import type { Flag } from './flag';
import type { NightSnapshot } from './night';

/** Whether what a target needs fits into what is left of its night. */
export type AgainReach = 'fits' | 'in part' | 'down' | 'not known';

/** A doubtful target and what another exposure of it would take. Times ISO 8601 UTC. */
export interface AgainEntry {
  spectrum: string;
  name: string;
  source: string;
  ra: number | null;
  dec: number | null;
  confidence: Confidence;
  redshift: number | null;
  probability: number;
  exposureSeconds: number | null;
  /** null where emission lines say nothing of it. */
  needed: {
    factor: number;
    extraSeconds: number | null;
    atLeast: boolean;
    limitedBy: 'second line' | 'probability';
    line: string | null;
    signalToNoiseNow: number;
    signalToNoiseThen: number;
  } | null;
  /** What is left tonight at an airmass of 2 or less; null where nothing is, or the site or position is not known. */
  up: { from: string; until: string } | null;
  /** All of the night's stretches at an airmass of 2 or less. */
  above: { from: string; until: string }[];
  reach: AgainReach;
  worthBitsPerHour: number | null;
}

/** The zero point of the night's wavelengths by the sky's own lines. */
export interface SkyCheckReport {
  count: number;
  zeroPointKms: number;
  zeroPointErrorKms: number | null;
  scatterKms: number;
  drift: { kmsPerHour: number; errorKmsPerHour: number } | null;
  outliers: { id: string; name: string; timeMs: number | null; offsetKms: number; scatterKms: number }[];
}

/** What a night brought, what was measured, what is wrong, and what to point at again. */
export interface NightReport {
  night: NightSnapshot;
  instrument: string | null;
  siteKnown: boolean;
  /** Between the astronomical twilights at the site; null where that is not known or does not come. */
  dark: { from: string; until: string } | null;
  /** From when the time that is left is counted. */
  counted: { from: string; since: 'now' | 'the last exposure' | 'dusk' } | null;
  exposures: { first: string | null; last: string | null };
  classes: { name: string; count: number }[];
  flags: { flag: Flag; count: number }[];
  medianNoiseFactor: number | null;
  sky: SkyCheckReport | null;
  skyChecks: SkyCheckReport['outliers'];
  skyWithout: number;
  again: AgainEntry[];
}

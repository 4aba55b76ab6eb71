import type { Confidence } from '$lib/domain/confidence';
import type { SpectrumClass } from '$lib/science/simulate/recipe';

/** A group of spectra in the accuracy bench: a class of the simulator, or spectra turned upside down. */
export type Group = SpectrumClass | 'sign-inverted';

/** What the bench must know of a true answer. */
export interface KnownAnswer {
  /** Redshift as measured; null where there is none to find. */
  redshift: number | null;
  /** Where it differs (Lyman-alpha emitters), the systemic one. */
  redshiftSystemic: number | null;
  secondRedshift: number | null;
  /** Broad lines or absorption only: the wider tolerance holds. */
  broad: boolean;
  /** An emission-line redshift is there to be found. */
  hasEmission: boolean;
  bestSignalToNoise: number;
  featuresOverFour: number;
  /** Cramér-Rao bound of the redshift error. */
  redshiftBound: number | null;
  /** Name of the strongest feature, for single-line spectra. */
  strongestLine: string | null;
  declaredErrorFactor: number;
  artefacts: string[];
}

/** Deviations over quoted errors of one line that was put in and measured. */
export interface LinePull {
  line: string;
  signalToNoise: number;
  flux: number | null;
  equivalentWidth: number | null;
}

/** One spectrum of the bench: what was true, what was said, and how the two compare. */
export interface Outcome {
  group: Group;
  /** What a person would call the spectrum: class and seed, or the file. */
  label: string;
  seed: number;
  known: KnownAnswer;
  answer: {
    redshift: number | null;
    redshiftError: number | null;
    probability: number;
    confidence: Confidence;
    /** Redshift and probability of every candidate, best first. */
    candidates: [redshift: number, probability: number][];
    flags: string[];
    noiseFactor: number | null;
  };
  judged: {
    /** The published answer is right; false where there is none. */
    right: boolean;
    /** One of the first three candidates is right. */
    rightInThree: boolean;
    /** Some candidate is right. */
    rightAnywhere: boolean;
    /** The published answer is off by more than 1,000 km/s, or there was nothing to find. */
    farOff: boolean;
    /** The best candidate, published or not, lies within 1,000 km/s: the event that probabilities predict. */
    bestWithinThousand: boolean;
    /** (answer - truth) / quoted error, where right. */
    redshiftPull: number | null;
    /** (answer - truth) / Cramér-Rao bound, where right. */
    overBound: number | null;
    /** Name that the answer gives to the strongest feature of a single-line spectrum. */
    namedLine: string | null;
    linePulls: LinePull[];
  };
  milliseconds: number;
}

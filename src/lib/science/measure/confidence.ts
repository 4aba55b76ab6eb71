import type { Confidence } from '$lib/domain/confidence';

/** What confidence is decided from. */
export interface ConfidenceInput {
  /** Calibrated probability of the first candidate. */
  probability: number;
  /** Calibrated probability of "nothing here" plus "star". */
  probabilityOfNoGalaxy: number;
  /** Lines with signal-to-noise of 4 or more from different transitions. */
  independentLines: number;
  /** A doublet fits better than one line by delta chi-square of 25 or more. */
  resolvedDoublet: boolean;
  /** Asymmetric Lyman-alpha with a continuum break. */
  unmistakableProfile: boolean;
  /** Rests on C IV alone or on a single feature of unknown identity. */
  unknownIdentity: boolean;
  /** A Balmer line that the forbidden lines ask for is in range and not seen. */
  lacksBalmer: boolean;
  /** Absorption alone: the number of strong features behind it, else null. */
  absorptionFeatures: number | null;
}

/**
 * The confidence word, the first that holds: `secure` for a probability of 0.995 or more and unmistakable evidence,
 * `probable` from 0.90, `ambiguous` where something extragalactic is there and several redshifts share it, else `none`.
 */
export function confidenceOf(input: ConfidenceInput): Confidence {
  const evidence = input.independentLines >= 2 || input.resolvedDoublet || input.unmistakableProfile;
  const absorptionHolds = input.absorptionFeatures === null ? evidence : input.absorptionFeatures >= 3;
  if (input.probability >= 0.995 && absorptionHolds && !input.unknownIdentity && !input.lacksBalmer) return 'secure';
  if (input.probability >= 0.9) return 'probable';
  if (input.probabilityOfNoGalaxy <= 0.5) return 'ambiguous';
  return 'none';
}

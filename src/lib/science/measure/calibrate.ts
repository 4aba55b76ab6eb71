import map from './calibration-map.json';

/** Version of the calibration map; part of the settings hash. */
export const CALIBRATION_VERSION: string = map.version;

const GROUPS: Readonly<Record<string, { offset: number; slope: number }>> = map.groups;

/**
 * Maps a raw posterior to a calibrated probability of "within 1,000 km/s of the truth": a straight line on log odds,
 * one for every kind of object and evidence. Monotone in the raw posterior.
 *
 * @param raw probability in [0, 1]
 * @param group kind of object and evidence, e.g. `quasar, settled`; unknown groups take the mean line
 */
export function calibratedProbability(raw: number, group: string): number {
  const { offset, slope } = GROUPS[group] ?? map.any;
  return 1 / (1 + Math.exp(-(offset + slope * logOdds(raw))));
}

/** Log odds, bounded at one in a million: no posterior of a model of the world means more. */
export function logOdds(probability: number): number {
  const bounded = Math.min(1 - 1e-6, Math.max(1e-6, probability));
  return Math.log(bounded / (1 - bounded));
}

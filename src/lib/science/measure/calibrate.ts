import map from './calibration-map.json';

/** A plane over the log odds of the raw posterior and the logarithm of the signal. */
export interface CalibrationLine {
  offset: number;
  slope: number;
  signalSlope: number;
}

/** Version of the calibration map; part of the settings hash. */
export const CALIBRATION_VERSION: string = map.version;

const GROUPS: Readonly<Record<string, CalibrationLine>> = map.groups;

/**
 * Maps a raw posterior to a calibrated probability of "within 1,000 km/s of the truth": a plane over log odds and signal,
 * one for every kind of object and evidence. Monotone in the raw posterior and in the signal.
 *
 * @param raw probability in [0, 1]
 * @param group kind of object and evidence, e.g. `quasar, settled`; unknown groups take the mean plane
 * @param signal signal-to-noise ratio of what the answer rests on
 */
export function calibratedProbability(raw: number, group: string, signal: number): number {
  const { offset, slope, signalSlope } = GROUPS[group] ?? map.any;
  return 1 / (1 + Math.exp(-(offset + slope * logOdds(raw) + signalSlope * logSignal(signal))));
}

/** Log odds, bounded at one in a million: no posterior of a model of the world means more. */
export function logOdds(probability: number): number {
  const bounded = Math.min(1 - 1e-6, Math.max(1e-6, probability));
  return Math.log(bounded / (1 - bounded));
}

/** ln of a signal-to-noise ratio over 10, bounded to ratios from 3 to 60. */
export function logSignal(signal: number): number {
  return Math.log(Math.min(60, Math.max(3, signal)) / 10);
}

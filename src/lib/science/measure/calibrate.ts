import map from './calibration-map.json';

/** Version of the calibration map; part of the settings hash. */
export const CALIBRATION_VERSION: string = map.version;

/**
 * Maps a raw posterior to a calibrated probability of "within 1,000 km/s of the truth": a straight line on log odds.
 *
 * @param raw probability in [0, 1]
 */
export function calibratedProbability(raw: number): number {
  const bounded = Math.min(1 - 1e-12, Math.max(1e-12, raw));
  const logOdds = map.offset + map.slope * Math.log(bounded / (1 - bounded));
  return 1 / (1 + Math.exp(-logOdds));
}

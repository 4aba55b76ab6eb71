/** What may be set for the engine. Each change makes another settings hash on the measurement. */
export interface MeasureSettings {
  /** Lowest redshift tried. */
  redshiftMinimum: number;
  /** Highest redshift tried; the data may end the range earlier. */
  redshiftMaximum: number;
  /** Candidates listed at most. */
  candidatesListed: number;
  /** Candidates that get a joint fit. */
  candidatesFitted: number;
  /** Compare the declared variance with the scatter of the line-free spectrum and scale errors by it. */
  noiseCheck: boolean;
}

export const DEFAULT_SETTINGS: Readonly<MeasureSettings> = Object.freeze({
  redshiftMinimum: -0.003,
  redshiftMaximum: 7.5,
  candidatesListed: 8,
  candidatesFitted: 6,
  noiseCheck: true,
});

/** Version of the engine; raise it with any change that can change an answer. */
export const ENGINE_VERSION = '0.2.0';

/**
 * A short hash of the settings and the calibration map's version: FNV-1a, 32 bit, hexadecimal.
 * Source: Fowler, Noll & Vo, IETF draft-eastlake-fnv.
 */
export function settingsHash(settings: MeasureSettings, calibrationVersion: string): string {
  const text = JSON.stringify([Object.entries(settings).sort(([a], [b]) => (a < b ? -1 : 1)), calibrationVersion]);
  let hash = 0x811c9dc5;
  for (let i = 0; i < text.length; i++) hash = Math.imul(hash ^ text.charCodeAt(i), 0x01000193);
  return (hash >>> 0).toString(16).padStart(8, '0');
}

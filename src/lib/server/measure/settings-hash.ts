import { createHash } from 'node:crypto';
import type { Instrument } from '$lib/domain/instrument';
import type { Measurement } from '$lib/domain/measurement';
import { LINE_LIST_VERSION } from '$lib/science/constants/lines';
import { CALIBRATION_VERSION } from '$lib/science/measure/calibrate';
import { DEFAULT_SETTINGS, ENGINE_VERSION, settingsHash } from '$lib/science/measure/settings';

/** JSON with keys in order, so that two descriptions that say the same are the same text. */
function canonical(value: unknown): string {
  if (Array.isArray(value)) return `[${value.map((item) => canonical(item ?? null)).join(',')}]`;
  if (value === null || typeof value !== 'object') return JSON.stringify(value) ?? 'null';
  const entries = Object.entries(value).filter(([, item]) => item !== undefined);
  const sorted = entries.sort(([a], [b]) => (a < b ? -1 : 1));
  return `{${sorted.map(([key, item]) => `${JSON.stringify(key)}:${canonical(item)}`).join(',')}}`;
}

/** What of a description bears on an answer: not its name, how positions are doubted, nor why a region is bad. */
function bearing({ name: _, positionToleranceArcsec: __, badRegionsAngstrom, ...rest }: Instrument): object {
  return { ...rest, badRegionsAngstrom: badRegionsAngstrom?.map(([from, to]) => [from, to]) };
}

/**
 * Names all that a measurement rests on besides the engine's version: its settings and calibration map (`engine.settings`
 * as the engine gives it), line list, and the instrument description with its column assignment. SHA-256, 64 hexadecimal
 * digits. Two measurements of a spectrum with one engine version and one hash are the same measurement.
 */
export function completeSettingsHash(engine: Measurement['engine'], instrument?: Instrument | null): string {
  const text = canonical([engine.settings, engine.lineList, instrument ? bearing(instrument) : null]);
  return createHash('sha256').update(text).digest('hex');
}

/** What this process's engine would write on a measurement now. */
export function currentEngine(instrument?: Instrument | null): { version: string; settings: string } {
  const settings = settingsHash(DEFAULT_SETTINGS, CALIBRATION_VERSION);
  const engine = { version: ENGINE_VERSION, lineList: LINE_LIST_VERSION, settings };
  return { version: ENGINE_VERSION, settings: completeSettingsHash(engine, instrument) };
}

import type { Candidate, Measurement } from '$lib/domain/measurement';
import type { Spectrum } from '$lib/domain/spectrum';
import { LINE_LIST_VERSION } from '../constants/lines';
import { calibratedProbability, CALIBRATION_VERSION } from './calibrate';
import { decide, type Decision } from './decide';
import { flagsOf } from './flags';
import { weighHypotheses } from './hypotheses';
import { posteriorOf } from './posterior';
import { prepareSpectrum } from './prepare';
import { DEFAULT_SETTINGS, ENGINE_VERSION, settingsHash, type MeasureSettings } from './settings';
import { unusableMeasurement } from './unusable-measurement';

/** Fewer usable pixels than this carry no redshift. */
const LEAST_USABLE_PIXELS = 20;

/**
 * Measures the redshift of one spectrum: noise, continuum, detection, scan, joint fits, evidence, calibrated
 * probability, confidence, reasons.
 *
 * @param spectrum vacuum, barycentric ångström; `variance` Infinity where unusable
 * @param settings changes to the default settings
 * @returns what the engine says; a spectrum without enough usable pixels gets confidence `none` and says why
 */
export function measureSpectrum(spectrum: Spectrum, settings: Partial<MeasureSettings> = {}): Measurement {
  const used: MeasureSettings = { ...DEFAULT_SETTINGS, ...settings };
  const engine = {
    version: ENGINE_VERSION,
    lineList: LINE_LIST_VERSION,
    settings: settingsHash(used, CALIBRATION_VERSION),
  };
  const prepared = prepareSpectrum(spectrum);
  if (prepared.working.usable < LEAST_USABLE_PIXELS) return unusableMeasurement(spectrum, engine);
  const hypotheses = weighHypotheses(prepared, used);
  const posterior = posteriorOf(hypotheses);
  const decision: Decision = decide(prepared, hypotheses, posterior, calibratedProbability, used.candidatesListed);
  const { first } = decision;
  const stated = decision.confidence !== 'none' && first !== null;
  const candidates: Candidate[] = decision.candidates;
  return {
    redshift: stated ? first.redshift : null,
    redshiftError: stated ? first.redshiftError : null,
    redshiftErrorMeasured: stated ? first.redshiftErrorMeasured : null,
    redshiftSystemic: stated ? first.redshiftSystemic : null,
    secondRedshift: stated ? decision.secondRedshift : null,
    probability: decision.probability,
    rivals: decision.rivals,
    confidence: decision.confidence,
    fluxUnit: spectrum.fluxUnit,
    candidates,
    lines: stated ? (candidates[0]?.lines ?? []) : [],
    derived: null,
    reasons: decision.reasons,
    flags: flagsOf({
      spectrum,
      prepared,
      features: hypotheses.features,
      explained: decision.explained,
      noiseFactor: decision.noiseFactor,
      broad: decision.broad && stated,
      star: decision.rivals.star > 0.5,
      secondRedshift: stated ? decision.secondRedshift : null,
      bestSignalToNoise: decision.bestSignalToNoise,
      nearEdge: decision.nearEdge,
      linesBlended: decision.linesBlended,
    }),
    noiseFactor: decision.noiseFactor,
    frame: { medium: spectrum.medium, specsys: spectrum.specsys, barycentricKms: spectrum.barycentricKms },
    engine,
  };
}

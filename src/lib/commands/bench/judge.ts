import type { Measurement } from '$lib/domain/measurement';
import { SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';
import { EMISSION_WAVELENGTHS } from '$lib/science/simulate/emission-lines';
import type { Truth, TruthLine } from '$lib/science/simulate/truth';
import type { Group, KnownAnswer, LinePull, Outcome } from './outcome';

const NARROW_TOLERANCE = 0.0005;
const BROAD_TOLERANCE = 0.003;
const FAR_KMS = 1000;
/** Below this nobody could know a line's flux from the spectrum. */
const LEAST_TRANSMISSION = 0.97;

/**
 * Whether a redshift is right: within 0.0005 (1 + z), 0.003 (1 + z) for broad lines and absorption; for Lyman-alpha anywhere from the
 * peak to the systemic redshift, that tolerance added at both ends; for a blend of two, either.
 */
export function isRight(known: KnownAnswer, redshift: number): boolean {
  const tolerance = known.broad ? BROAD_TOLERANCE : NARROW_TOLERANCE;
  return distanceTo(known, redshift) <= tolerance;
}

/** Least |dz| / (1 + z) from any true redshift; 0 between a line's peak and the systemic redshift; Infinity where none is true. */
export function distanceTo(known: KnownAnswer, redshift: number): number {
  if (known.redshift === null) return Infinity;
  const low = Math.min(known.redshift, known.redshiftSystemic ?? known.redshift);
  const high = Math.max(known.redshift, known.redshiftSystemic ?? known.redshift);
  const beyond = redshift < low ? low - redshift : redshift > high ? redshift - high : 0;
  const first = beyond / (1 + known.redshift);
  if (known.secondRedshift === null) return first;
  return Math.min(first, Math.abs(redshift - known.secondRedshift) / (1 + known.secondRedshift));
}

/** Whether a redshift lies within 1,000 km/s of the truth. */
export function isWithinThousand(known: KnownAnswer, redshift: number): boolean {
  return distanceTo(known, redshift) * SPEED_OF_LIGHT_KMS <= FAR_KMS;
}

/** The line whose rest wavelength an answer gives to a feature, or `other` where none lies within 0.3 %. */
export function nameFeature(wavelengthObserved: number, redshift: number): string {
  const rest = wavelengthObserved / (1 + redshift);
  let best = 'other';
  let nearest = 0.003;
  for (const [name, wavelength] of Object.entries(EMISSION_WAVELENGTHS)) {
    const apart = Math.abs(wavelength / rest - 1);
    if (apart < nearest) {
      nearest = apart;
      best = name;
    }
  }
  return featureName(best);
}

/** One name for the two lines of [O II], which most spectra blend. */
function featureName(line: string): string {
  return line.startsWith('[O II] 37') ? '[O II] 3728' : line;
}

/** Name of the line with the highest signal-to-noise ratio; null without lines. */
export function strongestFeature(lines: readonly TruthLine[]): string | null {
  let strongest: TruthLine | null = null;
  for (const line of lines) if (line.signalToNoise > (strongest?.signalToNoise ?? 0)) strongest = line;
  return strongest && featureName(strongest.line);
}

/** What the bench keeps of a simulated truth. */
export function knownAnswer(truth: Truth): KnownAnswer {
  return {
    redshift: truth.redshift,
    redshiftSystemic: truth.lyman ? truth.redshiftSystemic : null,
    secondRedshift: truth.secondRedshift,
    broad: truth.broad || truth.class === 'passive',
    hasEmission: truth.hasEmission,
    bestSignalToNoise: truth.bestSignalToNoise,
    featuresOverFour: truth.featuresOverFour,
    redshiftBound: truth.redshiftBound,
    strongestLine: strongestFeature(truth.lines),
    declaredErrorFactor: truth.declaredErrorFactor,
    artefacts: truth.artefacts,
  };
}

/** Deviations of every narrow line of S/N >= 5 that was put in whole, not lost in a telluric band, and measured. */
function linePulls(lines: readonly TruthLine[], measurement: Measurement, fluxScale: number): LinePull[] {
  const pulls: LinePull[] = [];
  for (const line of lines) {
    if (line.broad || line.signalToNoise < 5 || line.coverage < 0.98 || line.object !== 0) continue;
    if (line.transmission < LEAST_TRANSMISSION) continue;
    const fit = measurement.lines.find((l) => Math.abs(l.wavelengthRest - line.wavelengthRest) < 0.3);
    if (!fit) continue;
    const over = (value: number | null, error: number | null, expected: number | null) =>
      value !== null && error !== null && error > 0 && expected !== null ? (value - expected) / error : null;
    pulls.push({
      line: line.line,
      signalToNoise: line.signalToNoise,
      flux: over(fit.flux, fit.fluxError, line.flux * fluxScale),
      equivalentWidth: over(fit.equivalentWidthRest, fit.equivalentWidthRestError, line.equivalentWidthRest),
    });
  }
  return pulls;
}

/**
 * Compares what the engine says with what is known.
 *
 * @param lines what was put in, for the pulls of fluxes
 * @param fluxScale factor from the unit of `lines` to that of the measurement
 */
export function judge(
  spectrum: { group: Group; seed: number; label: string },
  known: KnownAnswer,
  measurement: Measurement,
  milliseconds: number,
  lines: readonly TruthLine[],
  fluxScale = 1,
): Outcome {
  const { redshift, redshiftError, candidates } = measurement;
  const right = redshift !== null && isRight(known, redshift);
  const single =
    known.redshift !== null && !known.broad && known.secondRedshift === null && known.redshiftSystemic === null;
  const deviation = right && single && redshift !== null ? redshift - (known.redshift ?? 0) : null;
  const strongest = lines.find((line) => featureName(line.line) === known.strongestLine);
  return {
    ...spectrum,
    known,
    answer: {
      redshift,
      redshiftError,
      probability: measurement.probability,
      confidence: measurement.confidence,
      candidates: candidates.map((c) => [c.redshift, c.probability]),
      flags: measurement.flags,
      noiseFactor: measurement.noiseFactor,
    },
    judged: {
      right,
      rightInThree: candidates.slice(0, 3).some((c) => isRight(known, c.redshift)),
      rightAnywhere: candidates.some((c) => isRight(known, c.redshift)),
      farOff: redshift !== null && !isWithinThousand(known, redshift),
      bestWithinThousand: candidates.length > 0 && isWithinThousand(known, candidates[0].redshift),
      redshiftPull: deviation !== null && redshiftError ? deviation / redshiftError : null,
      overBound: deviation !== null && known.redshiftBound ? deviation / known.redshiftBound : null,
      namedLine: redshift !== null && strongest ? nameFeature(strongest.wavelengthObserved, redshift) : null,
      linePulls: right && known.secondRedshift === null ? linePulls(lines, measurement, fluxScale) : [],
    },
    milliseconds,
  };
}

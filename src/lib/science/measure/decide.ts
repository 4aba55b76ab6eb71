import type { Confidence } from '$lib/domain/confidence';
import type { Candidate } from '$lib/domain/measurement';
import { FWHM_PER_SIGMA } from '../constants/physical';
import type { FittedCandidate } from './candidate-fit';
import { confidenceOf, type ConfidenceInput } from './confidence';
import { doubletAdvantage } from './doublet-test';
import { asFinal, finalFit, supportingLines, type FinalFit, type LineSupport } from './final-fit';
import type { AbsorptionCandidate, Hypotheses } from './hypotheses';
import { lineFitsOf } from './line-fits';
import { breakLogRatio, systemicRedshift } from './lyman-alpha';
import type { Posterior } from './posterior';
import type { PreparedSpectrum } from './prepare';
import { reasonsAgainst, reasonsFor } from './reasons';
import { redshiftWithErrors } from './redshift-error';
import { secondRedshiftOf } from './second-redshift';

/** The first candidate's redshift as reported. */
export interface FirstRedshift {
  redshift: number;
  redshiftError: number;
  redshiftErrorMeasured: number;
  redshiftSystemic: number | null;
}

/** Everything a measurement says beyond its provenance. */
export interface Decision {
  first: FirstRedshift | null;
  candidates: Candidate[];
  probability: number;
  rivals: { nothing: number; star: number; passive: number };
  confidence: Confidence;
  secondRedshift: number | null;
  reasons: string[];
  explained: readonly number[];
  noiseFactor: number;
  broad: boolean;
  bestSignalToNoise: number;
  nearEdge: boolean;
  linesBlended: boolean;
}

/** Error given to an absorption redshift, km/s: a fifth of the widest kernel that sees its lines. */
const ABSORPTION_ERROR_KMS = 60;
const RESOLVED_DOUBLET = 25;
/** Probability that a redshift resting on one feature, or on few absorption features, can reach. */
const SINGLE_FEATURE_CEILING = 0.88;
const ABSORPTION_CEILING = 0.8;
/** Broad lines that are shifted and eaten so often that they fix no redshift to 1,000 km/s without another line. */
const UNRELIABLE = ['C IV', 'Si IV', 'Lyman-alpha', 'N V', 'He II', 'Al III'];
const UNRELIABLE_CEILING = 0.95;
/** Candidates refitted with every line; the others keep the fit they were weighed by. */
const CANDIDATES_REFITTED = 3;

type Entry =
  | { emission: FittedCandidate; absorption: null; probability: number }
  | { emission: null; absorption: AbsorptionCandidate; probability: number };

/** Refits the best candidates, calibrates, and decides on the confidence word and its reasons. */
export function decide(
  prepared: PreparedSpectrum,
  hypotheses: Hypotheses,
  posterior: Posterior,
  calibrate: (raw: number) => number,
  listed: number,
): Decision {
  const entries: Entry[] = [
    ...posterior.emission.map(({ candidate, probability }) => ({ emission: candidate, absorption: null, probability })),
    ...posterior.absorption.map(({ candidate, probability }) => ({
      emission: null,
      absorption: candidate,
      probability,
    })),
  ].sort((a, b) => b.probability - a.probability);
  const top = entries[0];
  const refit0 = top?.emission
    ? finalFit(prepared.working, prepared.continuum, hypotheses.context.noiseFactor, top.emission, 12)
    : null;
  const evidence = top ? evidenceOf(prepared, hypotheses, top, refit0) : null;
  const probability = top && evidence ? Math.min(ceilingOf(evidence), calibrate(top.probability)) : 0;
  const rest = top && top.probability < 1 ? (1 - probability) / (1 - top.probability) : 1;
  const rivals = {
    nothing: posterior.nothing * rest,
    star: posterior.star * rest,
    passive: posterior.absorption.reduce(
      (sum, entry) => sum + (top?.absorption === entry.candidate ? probability : entry.probability * rest),
      0,
    ),
  };
  const context = hypotheses.context;
  const refits = entries.slice(0, listed).map((entry, rank) => {
    if (!entry.emission) return null;
    if (rank >= CANDIDATES_REFITTED) return asFinal(entry.emission);
    return rank === 0 ? refit0 : finalFit(prepared.working, prepared.continuum, context.noiseFactor, entry.emission, 3);
  });
  const candidates = entries.slice(0, listed).map((entry, rank) => {
    const share = rank === 0 ? probability : entry.probability * rest;
    const refit = refits[rank];
    return entry.emission && refit
      ? emissionCandidate(prepared, hypotheses, entry.emission, refit, share, rank === 0)
      : absorptionCandidate(entry.absorption!, share);
  });
  const base = {
    candidates,
    probability,
    rivals,
    explained: top?.emission?.explained ?? [],
    noiseFactor: context.noiseFactor,
  };
  if (!top || !evidence) {
    return {
      ...base,
      first: null,
      confidence: 'none',
      secondRedshift: null,
      reasons: ['Nothing stands out of the noise.'],
      broad: false,
      bestSignalToNoise: 0,
      nearEdge: false,
      linesBlended: false,
    };
  }
  const confidence = confidenceOf({
    probability,
    probabilityOfNoGalaxy: rivals.nothing + rivals.star,
    ...evidence,
  });
  const second = top.emission
    ? secondRedshiftOf(
        top.emission,
        hypotheses.candidates.filter((c) => c !== top.emission),
        hypotheses.features,
      )
    : null;
  return {
    ...base,
    first: firstRedshift(candidates[0], top, refits[0]),
    confidence,
    secondRedshift: second ? Math.expm1(second.fit.logScale) : null,
    reasons: [...summary(confidence, rivals, candidates), ...candidates[0].reasonsFor, ...candidates[0].reasonsAgainst],
    broad: top.emission?.kind === 'broad',
    bestSignalToNoise: Math.max(0, ...candidates[0].lines.map((line) => line.signalToNoise ?? 0)),
    nearEdge: base.explained.slice(0, 1).some((index) => hypotheses.features[index].nearEdge),
    linesBlended: top.emission !== null && refits[0] !== null && blended(refits[0]),
  };
}

/**
 * Highest probability that the evidence allows: one feature never settles its own identity, unless its shape does, and
 * absorption needs several features.
 */
function ceilingOf(evidence: Evidence): number {
  if (evidence.absorptionFeatures !== null) return evidence.absorptionFeatures >= 4 ? 1 : ABSORPTION_CEILING;
  const settled = evidence.independentLines >= 2 || evidence.resolvedDoublet || evidence.unmistakableProfile;
  if (!settled) return SINGLE_FEATURE_CEILING;
  return evidence.unknownIdentity ? UNRELIABLE_CEILING : 1;
}

function firstRedshift(candidate: Candidate, top: Entry, refit: FinalFit | null): FirstRedshift {
  const measured =
    top.emission && refit ? redshiftWithErrors(refit, top.emission.kind === 'broad').measured : candidate.redshiftError;
  return {
    redshift: candidate.redshift,
    redshiftError: candidate.redshiftError,
    redshiftErrorMeasured: measured,
    redshiftSystemic: refit?.lyman ? systemicRedshift(candidate.redshift, refit.lyman.fwhmKms) : null,
  };
}

/** What the confidence word is decided from besides probabilities. */
type Evidence = Omit<ConfidenceInput, 'probability' | 'probabilityOfNoGalaxy'>;

function evidenceOf(prepared: PreparedSpectrum, hypotheses: Hypotheses, top: Entry, refit: FinalFit | null): Evidence {
  if (!top.emission || !refit) {
    return {
      independentLines: 0,
      resolvedDoublet: false,
      unmistakableProfile: false,
      unknownIdentity: false,
      absorptionFeatures: top.absorption?.strongFeatures ?? 0,
    };
  }
  const data = prepared.working;
  const support = supportingLines(refit, hypotheses.banks.lines, prepared);
  const clean = support.filter((line) => !line.nearSky).length;
  // Residuals of the night sky come in crowds: lines that all lie on it count as one unless there are many.
  const independentLines = clean > 0 || support.length >= 4 ? support.length : Math.min(1, support.length);
  const oxygen = refit.fit.components.findIndex((c) => c.name === '[O II] 3730' && c.width === 0);
  const resolvedDoublet =
    support.length < 2 &&
    oxygen >= 0 &&
    refit.fit.amplitude[oxygen] > 4 * refit.errors.amplitude[oxygen] &&
    doubletAdvantage(data, refit.fit.logScale, refit.fit.sigmaKms[0], refit.errorScale) >= RESOLVED_DOUBLET;
  const broken = breakLogRatio(data, Math.expm1(refit.logScale));
  const unmistakableProfile =
    refit.lyman !== null && refit.lyman.wingShare > 0.25 && broken.logRatio > 4 && broken.significance > 5;
  const reliable = (line: LineSupport) => !UNRELIABLE.some((name) => line.name.startsWith(name));
  const onlyCarbon = top.emission.kind === 'broad' && !support.some(reliable);
  return {
    independentLines,
    resolvedDoublet,
    unmistakableProfile,
    unknownIdentity: onlyCarbon,
    absorptionFeatures: null,
  };
}

function emissionCandidate(
  prepared: PreparedSpectrum,
  hypotheses: Hypotheses,
  candidate: FittedCandidate,
  refit: FinalFit,
  probability: number,
  first: boolean,
): Candidate {
  const data = prepared.working;
  const support: LineSupport[] = supportingLines(refit, hypotheses.banks.lines, prepared);
  const stated = redshiftWithErrors(refit, candidate.kind === 'broad');
  const scale = { flux: prepared.working.scale, errors: refit.errorScale };
  const lyman = candidate.kind === 'lyman';
  return {
    redshift: stated.redshift,
    redshiftError: stated.total,
    probability,
    objectClass: candidate.family.objectClass,
    fwhmKms: refit.lyman?.fwhmKms ?? FWHM_PER_SIGMA * refit.fit.sigmaKms[candidate.kind === 'broad' ? 1 : 0],
    reasonsFor: reasonsFor(data, refit.fit, support, hypotheses.banks.lines),
    reasonsAgainst: reasonsAgainst(refit.fit, refit.errors, support),
    lines: lineFitsOf(data, refit.fit, refit.errors, scale, first ? 2 : 3, lyman, refit.logScale),
  };
}

function absorptionCandidate(candidate: AbsorptionCandidate, probability: number): Candidate {
  const stretch = Math.exp(candidate.logScale);
  return {
    redshift: stretch - 1,
    redshiftError: (ABSORPTION_ERROR_KMS / 299792.458) * stretch,
    probability,
    objectClass: 'absorption only',
    fwhmKms: null,
    reasonsFor: [`Absorption of ${candidate.family}: ${candidate.strongFeatures} features deeper than 4 sigma.`],
    reasonsAgainst: ['No emission line speaks for it.'],
    lines: [],
  };
}

function summary(confidence: Confidence, rivals: Decision['rivals'], candidates: Candidate[]): string[] {
  if (confidence === 'none') {
    if (rivals.star > 0.5) return ['The absorption fits a star at rest better than any galaxy.'];
    return ['No redshift stands out from noise and artefacts.'];
  }
  const next = candidates[1];
  return next && next.probability > 1e-4
    ? [`The next best answer is z = ${next.redshift.toFixed(4)} with probability ${next.probability.toPrecision(2)}.`]
    : [];
}

/** Whether two fitted lines of different ions overlap within one width. */
function blended(refit: FinalFit): boolean {
  const { fit, errors } = refit;
  const seen = fit.components
    .map((component, i) => ({ component, strong: fit.amplitude[i] > 4 * errors.amplitude[i] }))
    .filter((entry) => entry.strong && entry.component.width === 0);
  return seen.some((a) =>
    seen.some((b) => {
      if (a === b || a.component.members[0].entry.ion === b.component.members[0].entry.ion) return false;
      const apart = Math.abs(Math.log(a.component.members[0].rest / b.component.members[0].rest)) * 299792.458;
      return apart < 1.2 * FWHM_PER_SIGMA * fit.sigmaKms[0];
    }),
  );
}

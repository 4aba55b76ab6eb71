import type { Confidence } from '$lib/domain/confidence';
import type { Candidate } from '$lib/domain/measurement';
import { FWHM_PER_SIGMA } from '../constants/physical';
import { absorptionCandidate, emissionCandidate } from './build-candidate';
import { confidenceOf } from './confidence';
import { asFinal, finalFit, type FinalFit } from './final-fit';
import type { Hypotheses } from './hypotheses';
import { lacksBalmer, type LineSignal } from './lacks-balmer';
import { systemicRedshift } from './lyman-alpha';
import { wholeRedshift } from './quasar/whole-redshift';
import type { Posterior } from './posterior';
import type { PreparedSpectrum } from './prepare';
import { redshiftWithErrors } from './redshift-error';
import { secondRedshiftOf } from './second-redshift';
import { ceilingOf, evidenceOf, groupOf, leavesFeatures, type Entry } from './settled-evidence';

/** The first candidate's redshift as reported. */
export interface FirstRedshift {
  redshift: number;
  redshiftError: number;
  redshiftErrorMeasured: number;
  redshiftSystemic: number | null;
}

/** Everything a measurement says beyond its provenance. */
export interface Decision {
  /** Posterior of the first candidate before calibration, and the group it is calibrated in. */
  rawProbability: number;
  group: string;
  /** Signal-to-noise ratio of what the first candidate rests on. */
  signal: number;
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

/** Candidates refitted with every line; the others keep the fit they were weighed by. */
const CANDIDATES_REFITTED = 2;
/** No other candidate is listed with more than this share of the first one's probability. */
const SECOND_SHARE = 0.95;

/** Refits the best candidates, calibrates, and decides on the confidence word and its reasons. */
export function decide(
  prepared: PreparedSpectrum,
  hypotheses: Hypotheses,
  posterior: Posterior,
  calibrate: (raw: number, group: string, signal: number) => number,
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
  if (refit0 && hypotheses.asQuasar && top.emission?.kind === 'broad') {
    refit0.wholeLogScale = wholeRedshift(hypotheses.asQuasar, top.emission.fit.logScale);
  }
  const evidence = top ? evidenceOf(prepared, hypotheses, top, refit0) : null;
  const leftover = top !== undefined && leavesFeatures(hypotheses, top);
  // Two peaks of Lyman-alpha look like the pair of [O II]: beside a feature left over, a doublet alone settles nothing.
  if (evidence && leftover && evidence.independentLines < 2) evidence.unknownIdentity = true;
  const group = top && evidence ? groupOf(top, evidence, leftover) : 'none';
  const signal = top ? signalOf(top, refit0) : 0;
  const probability = top && evidence ? Math.min(ceilingOf(evidence), calibrate(top.probability, group, signal)) : 0;
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
    // What calibration takes from the first answer is shared by the others, none of which may overtake it.
    const share = rank === 0 ? probability : Math.min(SECOND_SHARE * probability, entry.probability * rest);
    const refit = refits[rank];
    return entry.emission && refit
      ? emissionCandidate(prepared, hypotheses, entry.emission, refit, share, rank === 0)
      : absorptionCandidate(entry.absorption!, share);
  });
  const base = {
    rawProbability: top?.probability ?? 0,
    group,
    signal,
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
    lacksBalmer: top.emission !== null && refits[0] !== null && lacksBalmer(signalsInRange(refits[0])),
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

/** Signal-to-noise ratio of the strongest line, or what the evidence of absorption amounts to. */
function signalOf(top: Entry, refit: FinalFit | null): number {
  if (!top.emission || !refit) return Math.sqrt(2 * Math.max(0, top.absorption?.logEvidence ?? 0));
  return refit.fit.components.reduce((most, { auxiliary }, i) => {
    const signal = refit.fit.amplitude[i] / (refit.errors.amplitude[i] * refit.errorScale);
    return !auxiliary && signal > most ? signal : most;
  }, 0);
}

/** Signal-to-noise of every line that the fit reached, those it gave nothing too. */
function signalsInRange({ fit, errors }: FinalFit): LineSignal[] {
  const n = fit.components.length;
  return fit.components.flatMap(({ name }, i) =>
    fit.gram[i * n + i] > 0 ? [{ line: name, signalToNoise: fit.amplitude[i] / errors.amplitude[i] }] : [],
  );
}

import { equivalentWidthPrior } from './equivalent-width-prior';
import { evidenceOfFamily } from './family-weight';
import { sharesOfFeatures, type FeatureShares } from './feature-share';
import { artefactLogOdds } from './features';
import { BROAD_COMPONENTS, CORE_COMPONENTS, type LineComponent } from './fit/components';
import { fitErrors, type FitErrors } from './fit/fit-errors';
import { jointFit, type JointFit } from './fit/joint-fit';
import { LINE_FAMILIES, type LineFamily } from './line-families';
import { breakLogRatio, LYMAN_COMPONENTS } from './lyman-alpha';
import type { WeighContext } from './weigh-context';
import type { Suspect, SuspectKind } from './suspect';

/** A suspect after its joint fit. */
export interface FittedCandidate {
  fit: JointFit;
  errors: FitErrors;
  kind: SuspectKind;
  family: LineFamily;
  /** Log evidence against "nothing here", redshift integrated, artefacts allowed for (see `allowForArtefacts`). */
  logEvidence: number;
  /** The same before artefacts are allowed for. */
  ownEvidence: number;
  /** Of a quasar's, the part that its broad lines bring. */
  broadEvidence: number;
  /** Of a quasar's, the log evidence of the whole spectrum (see `compareQuasars`). */
  wholeEvidence: number;
  /** What its lines bring on every feature. */
  onFeatures: FeatureShares;
  /** Indices of the features its lines explain. */
  explained: number[];
  /** What the errors of the fit are multiplied by. */
  noiseFactor: number;
  /** Lyman-alpha alone: log ratio for the continuum break there. */
  breakLogRatio: number;
}

const NARROW_OF_QUASARS = [
  '[Ne V] 3427',
  '[O II] 3727',
  '[O II] 3730',
  '[Ne III] 3870',
  'H-beta 4863',
  '[O III] 5008',
  'H-alpha 6565',
  '[N II] 6585',
  '[S II] 6718',
  '[S II] 6733',
];

const QUASAR_COMPONENTS: readonly LineComponent[] = [
  ...CORE_COMPONENTS.filter((component) => NARROW_OF_QUASARS.includes(component.name)),
  ...BROAD_COMPONENTS,
];
const NARROW_COMPONENTS = CORE_COMPONENTS.filter((component) => component.name !== 'Lyman-alpha 1216');

/** Components fitted for each kind of suspect. */
export const COMPONENTS_OF_KIND: Record<SuspectKind, readonly LineComponent[]> = {
  narrow: NARROW_COMPONENTS,
  broad: QUASAR_COMPONENTS,
  lyman: LYMAN_COMPONENTS,
};

/** What local continua hide of lines counts up to this share of what stands on features: the rest is noise of wide lines. */
const HIDDEN_SHARE = 0.35;

/** Natural logarithm of the redshift range in ln(1+z) over which the prior is flat. */
const LOG_REDSHIFT_RANGE = Math.log(Math.log(8.5 / 0.997));

/**
 * Fits a suspect and weighs it: the best line family's evidence at the maximum, times the width of the redshift peak
 * over the flat prior in ln(1+z), less what artefacts would explain of the same features.
 *
 * @param steps Levenberg-Marquardt steps
 */
export function fitCandidate(context: WeighContext, suspect: Suspect, steps: number): FittedCandidate | null {
  const sigmas: [number, number] = suspect.kind === 'broad' ? [150, suspect.sigmaKms] : [suspect.sigmaKms, 1900];
  const start = { logScale: suspect.logScale, sigmaKms: sigmas };
  const fit = jointFit(context.data, COMPONENTS_OF_KIND[suspect.kind], start, steps);
  if (!fit) return null;
  const weighed = weighFit(context, fit, suspect.kind);
  return weighed.logEvidence > -Infinity ? weighed : null;
}

/** Goes on fitting a candidate from where it stands, and weighs it again; never worse than before. */
export function refineCandidate(
  context: WeighContext,
  candidate: FittedCandidate,
  steps: number,
  scale?: number,
): FittedCandidate {
  const start = { logScale: candidate.fit.logScale, sigmaKms: candidate.fit.sigmaKms };
  const fit = jointFit(context.data, candidate.fit.components, start, steps);
  if (!fit) return candidate;
  const refined = weighFit(context, fit, candidate.kind, scale);
  return refined.logEvidence > -Infinity ? refined : candidate;
}

/**
 * Weighs a fit; see `fitCandidate`.
 *
 * @param scale what errors are multiplied by; the fit's own misfit where left out
 */
export function weighFit(
  context: WeighContext,
  fit: JointFit,
  kind: SuspectKind,
  scale: number = misfitScale(fit, context.noiseFactor),
): FittedCandidate {
  const { features } = context;
  const errors = fitErrors(fit);
  const errorScale = scale;
  let best = -Infinity;
  let broadEvidence = 0;
  let bestFamily: LineFamily = LINE_FAMILIES[0];
  for (const family of LINE_FAMILIES) {
    if (family.kind !== kind) continue;
    const evidence = evidenceOfFamily(fit, family, context, errorScale);
    const value = Math.log(family.weight) + evidence.logEvidence;
    if (value > best) {
      best = value;
      broadEvidence = evidence.broad;
      bestFamily = family;
    }
  }
  const onFeatures = sharesOfFeatures(context, fit);
  const explained = features.map((_, index) => index).filter((index) => onFeatures.significance[index] > 2.5);
  const peakWidth = Math.log(2.5066 * Math.min(0.01, errors.logScale * errorScale)) - LOG_REDSHIFT_RANGE;
  const broken = kind === 'lyman' ? breakLogRatio(context.data, Math.expm1(fit.logScale)).logRatio : 0;
  // Hypotheses cut windows of different widths: all are weighed against the one continuum that passes under their lines.
  const seen = explained.reduce((sum, j) => sum + onFeatures.gain[j], 0);
  const hidden = kind === 'broad' ? 0 : Math.min(0.5 * fit.hidden, HIDDEN_SHARE * seen) / errorScale ** 2;
  const ownEvidence = best + hidden + peakWidth + broken + equivalentWidthPrior(context, fit);
  return {
    fit,
    errors,
    kind,
    family: bestFamily,
    logEvidence: ownEvidence,
    ownEvidence,
    broadEvidence,
    wholeEvidence: 0,
    onFeatures,
    explained,
    noiseFactor: errorScale,
    breakLogRatio: broken,
  };
}

/**
 * Takes from every candidate what artefacts would explain of the features it explains: as much as the filters saw there,
 * but no more than the candidate gained; in rough spectra by what it gained itself. Quasars are compared on the whole spectrum, where a feature left over has cost its own: all of them pay what the best one does, and
 * the less, the surer the whole spectrum is, since artefacts are not that broad.
 */
export function allowForArtefacts(context: WeighContext, candidates: readonly FittedCandidate[]): void {
  let best: FittedCandidate | null = null;
  for (const candidate of candidates) {
    if (candidate.kind === 'broad' && candidate.ownEvidence > (best?.ownEvidence ?? -Infinity)) best = candidate;
  }
  const ofQuasars = best ? artefactShare(best.wholeEvidence) * artefactsOf(context, best) : 0;
  for (const candidate of candidates) {
    const artefacts = candidate.kind === 'broad' ? ofQuasars : artefactsOf(context, candidate);
    candidate.logEvidence = candidate.ownEvidence - artefacts;
  }
}

/** Log evidences of the whole spectrum between which artefacts cease to explain a quasar's lines. */
const ARTEFACTS_CEASE = [100, 300] as const;

function artefactShare(wholeEvidence: number): number {
  const [from, to] = ARTEFACTS_CEASE;
  return Math.min(1, Math.max(0, (to - wholeEvidence) / (to - from)));
}

/**
 * Log odds that artefacts made every feature a candidate explains. Where they describe a feature better than the
 * candidate does, all that it gained there is theirs.
 */
function artefactsOf({ features }: WeighContext, candidate: FittedCandidate): number {
  const { explained, onFeatures, noiseFactor, kind, fit } = candidate;
  let artefacts = 0;
  for (const j of explained) {
    // A forest of absorption makes a quasar's spectrum rough without making its emission doubtful.
    const inForest = kind === 'broad' && features[j].logWavelength < LOG_FOREST_END + fit.logScale;
    const rough = features[j].rough && !inForest;
    const seen = rough ? onFeatures.significance[j] : features[j].bounded;
    const odds = artefactLogOdds(features[j], seen / noiseFactor);
    const whole = kind === 'broad' ? 1 : 1 + Math.min(HIDDEN_SHARE, fit.hidden / fit.gain);
    artefacts += rough ? odds : Math.min(odds, (whole * onFeatures.gain[j]) / noiseFactor ** 2);
  }
  return artefacts;
}

/** Rest ln(wavelength) up to which the forest and Lyman-alpha itself reach. */
const LOG_FOREST_END = Math.log(1260);

/**
 * Scale of the errors: the measured noise factor, or the fit's own root reduced chi-square where that is larger by more
 * than chance (two standard deviations of chi-square) allows.
 */
export function misfitScale(fit: JointFit, noiseFactor: number): number {
  const reduced = fit.chiSquare / fit.degreesOfFreedom;
  const chance = 1 + 2 * Math.sqrt(2 / fit.degreesOfFreedom);
  return Math.max(noiseFactor, Math.sqrt(Math.max(0, reduced / chance)));
}

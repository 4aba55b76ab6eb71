import { SETTLED_FEATURES } from './absorption';
import type { FittedCandidate } from './candidate-fit';
import type { ConfidenceInput } from './confidence';
import { doubletAdvantage } from './doublet-test';
import { supportingLines, type FinalFit, type LineSupport } from './final-fit';
import type { AbsorptionCandidate, Hypotheses } from './hypotheses';
import { breakLogRatio } from './lyman-alpha';
import type { PreparedSpectrum } from './prepare';
import { WIDEST_NARROW_KMS } from './suspect';

/** One possible answer: an emission redshift or an absorption redshift, with its posterior. */
export type Entry =
  | { emission: FittedCandidate; absorption: null; probability: number }
  | { emission: null; absorption: AbsorptionCandidate; probability: number };

/** Delta chi-square by which a doublet must beat one line. */
const RESOLVED_DOUBLET = 25;
/** Probability that a redshift resting on one feature, or on few absorption features, can reach. */
const SINGLE_FEATURE_CEILING = 0.88;
const ABSORPTION_CEILING = 0.8;
/** Broad lines that are shifted and eaten so often that they fix no redshift to 1,000 km/s without another line. */
const UNRELIABLE = ['C IV', 'Si IV', 'Lyman-alpha', 'N V', 'He II', 'Al III'];
const UNRELIABLE_CEILING = 0.95;
/** Significance from which on an unexplained feature casts doubt. */
const LEFTOVER_SIGNIFICANCE = 6;
/** Broad lines this wide (sigma, km/s) sit at the limit of the fit and may be continuum. */
const WIDEST_KMS = 4200;

/** What the confidence word is decided from besides probabilities. */
export type Evidence = Omit<ConfidenceInput, 'probability' | 'probabilityOfNoGalaxy' | 'lacksBalmer'>;

/** What speaks for an answer besides its probability. */
export function evidenceOf(
  prepared: PreparedSpectrum,
  hypotheses: Hypotheses,
  top: Entry,
  refit: FinalFit | null,
): Evidence {
  if (!top.emission || !refit) {
    return {
      independentLines: 0,
      resolvedDoublet: false,
      unmistakableProfile: false,
      unknownIdentity: false,
      absorptionFeatures: rivalled(top, hypotheses) ? 0 : (top.absorption?.strongFeatures ?? 0),
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
    !lymanRivals(hypotheses, top.emission) &&
    doubletAdvantage(data, refit.fit.logScale, refit.fit.sigmaKms[0], refit.errorScale) >= RESOLVED_DOUBLET;
  const broken = breakLogRatio(data, Math.expm1(refit.logScale));
  const unmistakableProfile =
    refit.lyman !== null && refit.lyman.wingShare > 0.25 && broken.logRatio > 4 && broken.significance > 5;
  const reliable = (line: LineSupport) => !UNRELIABLE.some((name) => line.name.startsWith(name));
  const slim = support.filter((line) => line.narrow).length;
  const broad = top.emission.kind === 'broad';
  const unknownIdentity = broad
    ? !support.some(reliable) || (slim === 0 && support.length < 3) || refit.fit.sigmaKms[1] > WIDEST_KMS
    : refit.fit.sigmaKms[0] > WIDEST_NARROW_KMS || onUltraviolet(top.emission, support);
  return {
    independentLines,
    resolvedDoublet,
    unmistakableProfile,
    unknownIdentity,
    absorptionFeatures: null,
  };
}

/** Share of an absorption redshift's log evidence from which on a star at rest is a rival: both then see the same dips. */
const STAR_RIVALS = 0.4;

function rivalled({ absorption }: Entry, { star }: Hypotheses): boolean {
  return absorption !== null && star.logEvidence > STAR_RIVALS * absorption.logEvidence;
}

/** Log evidence by which a doublet must beat every Lyman-alpha line, whose two peaks may look like one. */
const LYMAN_BEATEN = 25;

function lymanRivals({ candidates }: Hypotheses, top: FittedCandidate): boolean {
  return candidates.some((other) => other.kind === 'lyman' && other.logEvidence > top.logEvidence - LYMAN_BEATEN);
}

/** Narrow lines of the ultraviolet, which few galaxies show without Lyman-alpha or [O II]. */
const ULTRAVIOLET = ['C IV', 'He II 1640', '[C III]', 'C III]', 'Mg II'];

function onUltraviolet({ kind }: FittedCandidate, support: readonly LineSupport[]): boolean {
  return kind === 'narrow' && support.every((line) => ULTRAVIOLET.some((name) => line.name.startsWith(name)));
}

/** Whether the evidence settles which redshift the features stand for. */
export function isSettled(evidence: Evidence): boolean {
  if (evidence.absorptionFeatures !== null) return evidence.absorptionFeatures >= SETTLED_FEATURES;
  return evidence.independentLines >= 2 || evidence.resolvedDoublet || evidence.unmistakableProfile;
}

/** Whether an emission answer leaves a clean, strong feature unexplained: a second object, or the wrong redshift. */
export function leavesFeatures(hypotheses: Hypotheses, top: Entry): boolean {
  if (!top.emission) return false;
  const { features } = hypotheses;
  const { explained } = top.emission;
  const best = Math.max(0, ...explained.map((index) => features[index].bounded));
  return features.some(
    (feature, index) =>
      !explained.includes(index) &&
      !feature.nearSky &&
      !feature.nearEdge &&
      !feature.rough &&
      feature.artefactRate < 1e-3 &&
      feature.bounded > Math.max(LEFTOVER_SIGNIFICANCE, 0.2 * best),
  );
}

/** Answers of one kind of object resting on one kind of evidence are calibrated together. */
export function groupOf(top: Entry, evidence: Evidence, leftover: boolean): string {
  const objectClass = top.emission ? top.emission.family.objectClass : 'absorption only';
  if (!isSettled(evidence)) return `${objectClass}, unsettled`;
  if (evidence.unknownIdentity) return `${objectClass}, unreliable lines`;
  if (leftover) return `${objectClass}, features left over`;
  return evidence.independentLines >= 3 ? `${objectClass}, three lines` : `${objectClass}, settled`;
}

/**
 * Highest probability that the evidence allows: one feature never settles its own identity, unless its shape does, and
 * absorption needs several features.
 */
export function ceilingOf(evidence: Evidence): number {
  if (!isSettled(evidence)) return evidence.absorptionFeatures === null ? SINGLE_FEATURE_CEILING : ABSORPTION_CEILING;
  return evidence.unknownIdentity ? UNRELIABLE_CEILING : 1;
}

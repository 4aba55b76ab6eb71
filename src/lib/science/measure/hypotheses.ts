import { SPEED_OF_LIGHT_KMS } from '../constants/physical';
import { absorptionEvidence, ABSORPTION_SCAN_LINES, SETTLED_FEATURES, type AbsorptionEvidence } from './absorption';
import { allowForArtefacts, fitCandidate, refineCandidate, weighFit, type FittedCandidate } from './candidate-fit';
import { ABSORPTION_SIGMAS_KMS, BROAD_SIGMAS_KMS, filterBank, NARROW_SIGMAS_KMS, type FilterBank } from './detect';
import { withoutEmission, withoutTelluric } from './absorption-weights';
import { findFeatures, type Feature } from './features';
import { medianInPlace } from './order-statistics';
import { lowerBound } from './noise';
import type { PreparedSpectrum } from './prepare';
import { coarsen } from './quasar/coarse-spectrum';
import { compareQuasars } from './quasar/compare-quasars';
import { quasarLikelihood, type QuasarLikelihood } from './quasar/quasar-likelihood';
import { broadFeatures, quasarSuspects } from './quasar/quasar-suspects';
import { NARROW_SCAN_LINES, scanRedshifts } from './scan';
import type { MeasureSettings } from './settings';
import { identitiesOf, lymanCovered, shortlist } from './shortlist';
import type { Suspect } from './suspect';
import type { WeighContext } from './weigh-context';

/** An absorption redshift. */
export interface AbsorptionCandidate extends AbsorptionEvidence {
  logScale: number;
}

/** Every hypothesis about a spectrum, weighed. */
export interface Hypotheses {
  context: WeighContext;
  features: Feature[];
  /** Emission candidates, best first, each with the absorption at its redshift added to its evidence. */
  candidates: FittedCandidate[];
  /** Absorption redshifts beyond the stars', best first. */
  absorption: AbsorptionCandidate[];
  /** A star near rest. */
  star: AbsorptionCandidate;
  banks: { lines: FilterBank; bands: FilterBank };
  relativeResolution: number;
  /** Weighs the whole spectrum as a quasar's; null where nothing broad stands out. */
  asQuasar: QuasarLikelihood | null;
}

const IDENTITIES = [
  'H-alpha 6565',
  '[O III] 5008',
  '[O II] 3730',
  'Lyman-alpha 1216',
  'H-beta 4863',
  '[S III] 9533',
  'Paschen-alpha 18756',
];
/** Quasar redshifts that get a joint fit. */
const QUASARS_FITTED = 4;
/** Log evidence of the whole spectrum that a quasar must have for its costly fit to be worth while. */
const LEAST_QUASAR_EVIDENCE = 8;
/** Levenberg-Marquardt steps for every suspect, and then for the best. */
const FIRST_STEPS = 2;
const MORE_STEPS = 3;
const REFINED = 4;
/**
 * Log likelihood that broad shapes may bring before they are taken with a grain of salt: blends, iron, absorption and
 * skew make two descriptions of one broad line differ by more than noise allows, and line ratios must decide then.
 */
const BROAD_INFORMATION = 1000;
const STAR_KMS = 1500;
/** Absorption is looked for up to here: beyond, its strong features leave the optical. */
const ABSORPTION_REDSHIFT_LIMIT = 1.6;

/** Runs detection, scan, shortlist and joint fits, and weighs every hypothesis. */
export function weighHypotheses(prepared: PreparedSpectrum, settings: MeasureSettings): Hypotheses {
  const { guarded: working, continuum, stiffContinuum, residual, stiffResidual } = prepared;
  const middle = working.count >> 1;
  const relativeResolution = working.lsfSigma[middle] / working.wavelength[middle];
  const step = Math.min(4e-4, Math.max(5e-5, (relativeResolution * 2.355) / 3));
  const grid = { ...working, residual };
  const lines = filterBank(grid, NARROW_SIGMAS_KMS, step, settings.noiseCheck);
  const bands = filterBank({ ...working, residual: stiffResidual }, BROAD_SIGMAS_KMS, 1e-3, settings.noiseCheck);
  const features = findFeatures(working, residual, continuum, lines, 4);
  const dark = filterBank(
    { ...grid, weight: withoutEmission(working, features, lines) },
    ABSORPTION_SIGMAS_KMS,
    step,
    settings.noiseCheck,
  );
  const darkBands = filterBank(
    { ...working, residual: stiffResidual, weight: withoutTelluric(working) },
    BROAD_SIGMAS_KMS,
    1e-3,
    settings.noiseCheck,
  );
  const context: WeighContext = {
    data: working,
    continuum,
    stiffContinuum,
    features,
    noiseFactor: lines.filters[0].noiseFactor,
    logNoiseFlux: typicalLogNoise(lines),
  };
  const bumps = broadFeatures(bands);
  const asQuasar = bumps.length > 0 ? quasarLikelihood(coarsen(working, context.noiseFactor)) : null;
  const suspects = suspectsOf(
    lines,
    bands,
    features,
    relativeResolution,
    context.logNoiseFlux,
    settings,
    asQuasar,
    bumps,
  );
  const tried = suspects
    .map((suspect) => fitCandidate(context, suspect, FIRST_STEPS))
    .filter((fitted): fitted is FittedCandidate => fitted !== null);
  // Forest, iron and absorption roughen some identities of a quasar more than others: the best fit's misfit serves all.
  const broad = tried.filter((t) => t.kind === 'broad');
  const misfit = Math.min(...broad.map((t) => t.noiseFactor));
  const loudest = Math.max(0, ...broad.map((t) => t.fit.gain)) / 2 / misfit ** 2;
  const temper = broad.length > 0 ? Math.sqrt(1 + loudest / BROAD_INFORMATION) : 1;
  const broadScale = misfit * temper;
  const weighed = tried.map((t) => (t.kind === 'broad' ? weighFit(context, t.fit, 'broad', broadScale) : t));
  compareQuasars(weighed, asQuasar);
  allowForArtefacts(context, weighed);
  weighed.sort((a, b) => b.logEvidence - a.logEvidence);
  const level = (wavelength: number) =>
    stiffContinuum[Math.min(working.count - 1, lowerBound(working.wavelength, wavelength))];
  const absorptionAt = (logScale: number, star: boolean): AbsorptionCandidate => ({
    logScale,
    ...absorptionEvidence(
      { lines: dark, bands: darkBands },
      logScale,
      relativeResolution,
      context.logNoiseFlux,
      star,
      { lines: context.noiseFactor, bands: context.noiseFactor * temper },
      level,
    ),
  });
  const candidates = weighed.map((one, rank) =>
    rank < REFINED ? refineCandidate(context, one, MORE_STEPS, one.kind === 'broad' ? broadScale : undefined) : one,
  );
  const besideQuasars = compareQuasars(candidates, asQuasar);
  allowForArtefacts(context, candidates);
  for (const candidate of candidates) {
    candidate.logEvidence += Math.max(0, absorptionAt(candidate.fit.logScale, false).logEvidence);
  }
  const range = [settings.redshiftMinimum, Math.min(settings.redshiftMaximum, ABSORPTION_REDSHIFT_LIMIT)] as const;
  const peaks = scanRedshifts(dark, ABSORPTION_SCAN_LINES, range, 6, 1000, -1);
  const starLimit = STAR_KMS / SPEED_OF_LIGHT_KMS;
  const beside = (one: AbsorptionCandidate): AbsorptionCandidate =>
    one.wide || one.strongFeatures < SETTLED_FEATURES ? { ...one, logEvidence: besideQuasars(one.logEvidence) } : one;
  const absorption = peaks
    .filter((peak) => Math.abs(peak.logScale) > starLimit)
    .map((peak) => beside(absorptionAt(peak.logScale, false)))
    .sort((a, b) => b.logEvidence - a.logEvidence);
  // A cool star's bands, where the whole spectrum shows them, are the same wherever its lines stand.
  const coolStar = asQuasar ? besideQuasars(asQuasar.coolStar()) : -Infinity;
  const stars = [0, ...peaks.map((peak) => peak.logScale).filter((log) => Math.abs(log) <= starLimit)]
    .map((logScale) => beside(absorptionAt(logScale, true)))
    .map((star) => (coolStar > star.logEvidence ? { ...star, family: 'cool star', logEvidence: coolStar } : star))
    .sort((a, b) => b.logEvidence - a.logEvidence);
  return {
    context,
    features,
    candidates: distinct(candidates, relativeResolution),
    absorption,
    star: stars[0],
    banks: { lines, bands },
    relativeResolution,
    asQuasar,
  };
}

function typicalLogNoise(bank: FilterBank): number {
  const filter = bank.filters[Math.min(1, bank.filters.length - 1)];
  const scratch = new Float64Array(bank.count);
  let used = 0;
  for (let k = 0; k < bank.count; k++) if (filter.information[k] > 0) scratch[used++] = filter.information[k];
  return used > 0 ? -0.5 * Math.log(medianInPlace(scratch, used)) : 0;
}

function suspectsOf(
  lines: FilterBank,
  bands: FilterBank,
  features: readonly Feature[],
  relativeResolution: number,
  logNoiseFlux: number,
  settings: MeasureSettings,
  asQuasar: QuasarLikelihood | null,
  bumps: readonly number[],
): Suspect[] {
  const range = [settings.redshiftMinimum, settings.redshiftMaximum] as const;
  const narrowPeaks = scanRedshifts(lines, NARROW_SCAN_LINES, range, 18, 300);
  const identities = features.slice(0, 2).flatMap((feature) => identitiesOf(feature, IDENTITIES, range));
  const narrow = shortlist(
    lines,
    [...narrowPeaks, ...identities],
    relativeResolution,
    logNoiseFlux,
    settings.candidatesFitted + 2,
  );
  const broad = (asQuasar ? quasarSuspects(bands, bumps, asQuasar, range, QUASARS_FITTED) : []).filter(
    (suspect) => suspect.score > LEAST_QUASAR_EVIDENCE,
  );
  const suspects = [...narrow, ...broad];
  // A quasar's narrow lines may give its redshift away before its broad ones do, and the other way round.
  for (const suspect of broad.length > 0 ? narrow.slice(0, 2) : []) {
    if (suspect.kind === 'narrow') suspects.push({ ...suspect, kind: 'broad', sigmaKms: 1800 });
  }
  // The strongest feature as Lyman-alpha is always heard.
  if (features.length > 0) {
    const [peak] = identitiesOf(features[0], ['Lyman-alpha 1216'], range);
    const known = peak && suspects.some((s) => s.kind === 'lyman' && Math.abs(s.logScale - peak.logScale) < 2e-3);
    if (peak && !known && lymanCovered(lines, peak.logScale)) {
      suspects.push({ logScale: peak.logScale, sigmaKms: features[0].sigmaKms, kind: 'lyman', score: 0 });
    }
  }
  return suspects;
}

/** Drops candidates that repeat a better one of the same kind, and sorts by evidence. */
function distinct(candidates: FittedCandidate[], relativeResolution: number): FittedCandidate[] {
  const sorted = candidates.sort((a, b) => b.logEvidence - a.logEvidence || a.fit.logScale - b.fit.logScale);
  const kept: FittedCandidate[] = [];
  for (const candidate of sorted) {
    const width = Math.max(
      300 / SPEED_OF_LIGHT_KMS,
      2 *
        Math.hypot(relativeResolution, candidate.fit.sigmaKms[candidate.kind === 'broad' ? 1 : 0] / SPEED_OF_LIGHT_KMS),
    );
    if (kept.every((other) => Math.abs(other.fit.logScale - candidate.fit.logScale) > width)) kept.push(candidate);
  }
  return kept;
}

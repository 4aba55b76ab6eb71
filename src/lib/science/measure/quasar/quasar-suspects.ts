import { lineByName } from '../../constants/lines';
import { SPEED_OF_LIGHT_KMS } from '../../constants/physical';
import type { FilterBank } from '../detect';
import { BROAD_SCAN_LINES, scanRedshifts } from '../scan';
import type { Suspect } from '../suspect';
import type { QuasarFit, QuasarLikelihood } from './quasar-likelihood';

/** What the strongest broad features may be. */
const IDENTITIES = [
  'Lyman-alpha 1216',
  'C IV 1548',
  'C III] 1909',
  'Mg II 2796',
  'H-gamma 4342',
  'H-beta 4863',
  'H-alpha 6565',
];
const FEATURES = 4;
const LEAST_SIGNIFICANCE = 4.5;
const SCAN_PEAKS = 14;
/** Velocity sigmas tried, km/s, and distances from where the filters see a redshift, in ln(1+z). */
const SIGMAS_KMS = [1000, 1800, 3200];
const OFFSETS = [-0.003, 0.003];
const REFINED = 8;
const APART = 3000 / SPEED_OF_LIGHT_KMS;

/**
 * Redshifts at which the whole spectrum looks most like a quasar's, best first: those where the filters see broad lines
 * add up, and every identity of the strongest broad features, weighed on the whole spectrum.
 *
 * @param bumps see `broadFeatures`
 */
export function quasarSuspects(
  bands: FilterBank,
  bumps: readonly number[],
  weigh: QuasarLikelihood,
  redshiftRange: readonly [number, number],
  limit: number,
): Suspect[] {
  const peaks = scanRedshifts(bands, BROAD_SCAN_LINES, redshiftRange, SCAN_PEAKS, 3000).map((peak) => peak.logScale);
  for (const logWavelength of bumps) {
    for (const name of IDENTITIES) {
      const logScale = logWavelength - Math.log(lineByName(name).wavelengthVacuum);
      const inRange = Math.expm1(logScale) >= redshiftRange[0] && Math.expm1(logScale) <= redshiftRange[1];
      if (inRange && peaks.every((other) => Math.abs(other - logScale) > APART / 2)) peaks.push(logScale);
    }
  }
  const coarse = peaks.map((logScale) => weigh(logScale, SIGMAS_KMS[1])).sort(byEvidence);
  const fine = coarse
    .slice(0, REFINED)
    .flatMap((first) => [first, ...OFFSETS.map((offset) => weigh(first.logScale + offset, first.sigmaKms))]);
  const best = distinct(fine.sort(byEvidence), limit);
  return best
    .map(({ logScale }) => SIGMAS_KMS.map((sigmaKms) => weigh(logScale, sigmaKms)).sort(byEvidence)[0])
    .sort(byEvidence)
    .map(({ logScale, sigmaKms, logEvidence }) => ({ logScale, sigmaKms, kind: 'broad', score: logEvidence }));
}

const byEvidence = (a: QuasarFit, b: QuasarFit) => b.logEvidence - a.logEvidence || a.logScale - b.logScale;

function distinct(sorted: readonly QuasarFit[], limit: number): QuasarFit[] {
  const kept: QuasarFit[] = [];
  for (const fit of sorted) {
    if (kept.length >= limit) break;
    if (kept.every((other) => Math.abs(other.logScale - fit.logScale) > APART)) kept.push(fit);
  }
  return kept;
}

/** ln(wavelength) of the strongest bumps that the broad filters see, strongest first; without any there is no quasar. */
export function broadFeatures({ filters, count, start, step }: FilterBank): number[] {
  const height = (k: number) => Math.max(...filters.map((filter) => filter.significance[k]));
  const maxima: { k: number; value: number }[] = [];
  let last = height(0);
  let here = height(1);
  for (let k = 1; k < count - 1; k++) {
    const next = height(k + 1);
    if (here >= LEAST_SIGNIFICANCE && here >= last && here > next) maxima.push({ k, value: here });
    last = here;
    here = next;
  }
  maxima.sort((a, b) => b.value - a.value || a.k - b.k);
  const kept: number[] = [];
  for (const { k } of maxima) {
    if (kept.length >= FEATURES) break;
    if (kept.every((other) => Math.abs(other - k) * step > APART)) kept.push(k);
  }
  return kept.map((k) => start + k * step);
}

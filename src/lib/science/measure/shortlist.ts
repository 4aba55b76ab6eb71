import { lineByName } from '../constants/lines';
import { SPEED_OF_LIGHT_KMS } from '../constants/physical';
import type { FilterBank } from './detect';
import { familyEvidence, type FluxLikelihood, type RatioModel } from './evidence';
import type { Feature } from './features';
import { LINE_FAMILIES, type LineFamily } from './line-families';
import type { ScanPeak } from './scan';
import type { SuspectKind } from './suspect-kind';

export type { SuspectKind };

/** Kernels farther apart than this, in sigmas, share nothing worth counting. */
const OVERLAP_REACH = 8;
const LOG_LYMAN_ALPHA = Math.log(lineByName('Lyman-alpha 1216').wavelengthVacuum);

/** A redshift worth a joint fit. */
export interface Suspect {
  logScale: number;
  sigmaKms: number;
  kind: SuspectKind;
  /** Log evidence against "no lines", from the filters alone. */
  score: number;
}

/** A family's lines as numbers. */
interface FamilyLines {
  logRest: Float64Array;
  logRatio: Float64Array;
  scatter: Float64Array;
}

const linesOf = new Map<LineFamily, FamilyLines>(
  LINE_FAMILIES.map((family) => {
    const entries = Object.entries(family.lines);
    return [
      family,
      {
        logRest: Float64Array.from(entries, ([name]) => Math.log(lineByName(name).wavelengthVacuum)),
        logRatio: Float64Array.from(entries, ([, [ratio]]) => Math.log(ratio)),
        scatter: Float64Array.from(entries, ([, [, scatter]]) => scatter),
      },
    ];
  }),
);

/** Flux likelihood of a family's lines read off the filters at one redshift. */
function likelihoodFromFilters(
  bank: FilterBank,
  filterIndex: number,
  family: LineFamily,
  logScale: number,
  relativeResolution: number,
): { likelihood: FluxLikelihood; model: RatioModel } {
  const filter = bank.filters[filterIndex];
  const lines = linesOf.get(family)!;
  const most = lines.logRest.length;
  const right = new Float64Array(most);
  const information = new Float64Array(most);
  const position = new Float64Array(most);
  const logRatio = new Float64Array(most);
  const scatter = new Float64Array(most);
  let count = 0;
  for (let l = 0; l < most; l++) {
    const log = lines.logRest[l] + logScale;
    const at = (log - bank.start) / bank.step;
    const k = Math.floor(at);
    if (k < 0 || k >= bank.count - 1) continue;
    const t = at - k;
    const a = filter.information[k];
    const b = filter.information[k + 1];
    if (!(a > 0) || !(b > 0)) continue;
    right[count] = filter.numerator[k] * (1 - t) + filter.numerator[k + 1] * t;
    information[count] = a * (1 - t) + b * t;
    position[count] = log;
    logRatio[count] = lines.logRatio[l];
    scatter[count] = lines.scatter[l];
    count++;
  }
  const sigma = Math.hypot(relativeResolution, filter.sigmaKms / SPEED_OF_LIGHT_KMS);
  const gram = new Float64Array(count * count);
  for (let i = 0; i < count; i++) {
    gram[i * count + i] = 1.0001 * information[i];
    for (let j = 0; j < i; j++) {
      const apart = Math.abs(position[i] - position[j]) / sigma;
      if (apart > OVERLAP_REACH) continue;
      const both = Math.sqrt(information[i] * information[j]) * Math.exp(-0.25 * apart * apart);
      gram[i * count + j] = both;
      gram[j * count + i] = both;
    }
  }
  return {
    likelihood: { count, gram, right: right.slice(0, count) },
    model: { logRatio: logRatio.slice(0, count), scatter: scatter.slice(0, count) },
  };
}

/** Gain of the best single multiple of the family's median ratios: (r.b)^2 / (r G r) / 2, 0 where r.b is negative. */
function templateGain(likelihood: FluxLikelihood, model: RatioModel): number {
  const { count, gram, right } = likelihood;
  let rb = 0;
  let rgr = 0;
  for (let i = 0; i < count; i++) {
    const ri = Math.exp(model.logRatio[i]);
    rb += ri * right[i];
    for (let j = 0; j < count; j++) rgr += ri * gram[i * count + j] * Math.exp(model.logRatio[j]);
  }
  return rb > 0 && rgr > 0 ? (0.5 * rb * rb) / rgr : 0;
}

/**
 * Scores redshifts by the evidence of every line family, from the filters alone, and keeps the best.
 *
 * @param peaks from the scan
 * @param identities redshifts that explain the strongest features
 * @returns at most `limit` suspects, best first
 */
export function shortlist(
  bank: FilterBank,
  peaks: readonly ScanPeak[],
  bankKind: 'narrow' | 'broad',
  relativeResolution: number,
  logNoiseFlux: number,
  limit: number,
): Suspect[] {
  const families = LINE_FAMILIES.filter((family) => (family.kind === 'broad') === (bankKind === 'broad'));
  const suspects: Suspect[] = [];
  for (const peak of peaks) {
    const trials = families
      .map((family) => {
        const { likelihood, model } = likelihoodFromFilters(
          bank,
          peak.filter,
          family,
          peak.logScale,
          relativeResolution,
        );
        return { family, likelihood, model, gain: templateGain(likelihood, model) };
      })
      .filter(
        (trial) => trial.likelihood.count > 0 && (trial.family.kind !== 'lyman' || lymanCovered(bank, peak.logScale)),
      )
      .sort((a, b) => b.gain - a.gain)
      .slice(0, 2);
    const best = new Map<SuspectKind, number>();
    for (const { family, likelihood, model } of trials) {
      const score = Math.log(family.weight) + familyEvidence(likelihood, model, logNoiseFlux).logEvidence;
      best.set(family.kind, Math.max(score, best.get(family.kind) ?? -Infinity));
    }
    for (const [kind, score] of best) {
      if (score > -Infinity) {
        suspects.push({ logScale: peak.logScale, sigmaKms: bank.filters[peak.filter].sigmaKms, kind, score });
      }
    }
  }
  return suspects.sort((a, b) => b.score - a.score || a.logScale - b.logScale).slice(0, limit);
}

/** Redshifts at which each strong line would make a feature. */
export function identitiesOf(
  feature: Feature,
  names: readonly string[],
  redshiftRange: readonly [number, number],
): ScanPeak[] {
  const peaks: ScanPeak[] = [];
  for (const name of names) {
    const logScale = feature.logWavelength - Math.log(lineByName(name).wavelengthVacuum);
    const redshift = Math.expm1(logScale);
    if (redshift < redshiftRange[0] || redshift > redshiftRange[1]) continue;
    peaks.push({ logScale, gain: 0, filter: feature.filter });
  }
  return peaks;
}

/** Whether Lyman-alpha itself lies in the data: without it nothing is a Lyman-alpha emitter. */
export function lymanCovered(bank: FilterBank, logScale: number): boolean {
  const node = (LOG_LYMAN_ALPHA + logScale - bank.start) / bank.step;
  return node >= 1 && node < bank.count - 1;
}

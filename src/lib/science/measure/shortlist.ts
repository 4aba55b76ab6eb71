import { lineByName } from '../constants/lines';
import { SPEED_OF_LIGHT_KMS } from '../constants/physical';
import type { FilterBank } from './detect';
import { familyEvidence, openReference } from './evidence';
import type { Feature } from './features';
import { LINE_FAMILIES, type LineFamily } from './line-families';
import type { ScanPeak } from './scan';
import type { Suspect, SuspectKind } from './suspect';

/** Kernels farther apart than this, in sigmas, share nothing worth counting. */
const OVERLAP_REACH = 8;
const LOG_LYMAN_ALPHA = Math.log(lineByName('Lyman-alpha 1216').wavelengthVacuum);

/** A family's lines as numbers. */
interface FamilyLines {
  logRest: Float64Array;
  logRatio: Float64Array;
  /** Exponential of `logRatio`. */
  ratio: Float64Array;
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
        ratio: Float64Array.from(entries, ([, [ratio]]) => Math.exp(Math.log(ratio))),
        scatter: Float64Array.from(entries, ([, [, scatter]]) => scatter),
      },
    ];
  }),
);

const MOST_LINES = Math.max(...LINE_FAMILIES.map((family) => Object.keys(family.lines).length));

/** What the filters say of a family's lines; reused between calls, written before read. */
const seen = {
  likelihood: { count: 0, gram: new Float64Array(MOST_LINES ** 2), right: new Float64Array(MOST_LINES) },
  model: { logRatio: new Float64Array(MOST_LINES), scatter: new Float64Array(MOST_LINES) },
  ratio: new Float64Array(MOST_LINES),
  information: new Float64Array(MOST_LINES),
  position: new Float64Array(MOST_LINES),
};

/** Reads the flux likelihood of a family's lines off the filters at one redshift, into `seen`. */
function readFilters(
  bank: FilterBank,
  filterIndex: number,
  family: LineFamily,
  logScale: number,
  relativeResolution: number,
): void {
  const filter = bank.filters[filterIndex];
  const lines = linesOf.get(family)!;
  const { information, position, ratio } = seen;
  const { gram, right } = seen.likelihood;
  let count = 0;
  for (let l = 0; l < lines.logRest.length; l++) {
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
    ratio[count] = lines.ratio[l];
    seen.model.logRatio[count] = lines.logRatio[l];
    seen.model.scatter[count] = lines.scatter[l];
    count++;
  }
  const sigma = Math.hypot(relativeResolution, filter.sigmaKms / SPEED_OF_LIGHT_KMS);
  for (let i = 0; i < count; i++) {
    gram[i * count + i] = 1.0001 * information[i];
    for (let j = 0; j < i; j++) {
      const apart = Math.abs(position[i] - position[j]) / sigma;
      const both =
        apart > OVERLAP_REACH ? 0 : Math.sqrt(information[i] * information[j]) * Math.exp(-0.25 * apart * apart);
      gram[i * count + j] = both;
      gram[j * count + i] = both;
    }
  }
  seen.likelihood.count = count;
}

/** Gain of the best single multiple of the median ratios of what was read: (r.b)^2 / (r G r) / 2, 0 where r.b is negative. */
function templateGain(): number {
  const { count, gram, right } = seen.likelihood;
  const { ratio } = seen;
  let rb = 0;
  let rgr = 0;
  for (let i = 0; i < count; i++) {
    rb += ratio[i] * right[i];
    for (let j = 0; j < count; j++) rgr += ratio[i] * gram[i * count + j] * ratio[j];
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
  relativeResolution: number,
  logNoiseFlux: number,
  limit: number,
): Suspect[] {
  const families = LINE_FAMILIES.filter((family) => family.kind !== 'broad');
  const suspects: Suspect[] = [];
  for (const peak of peaks) {
    const trials: { family: LineFamily; gain: number }[] = [];
    for (const family of families) {
      if (family.kind === 'lyman' && !lymanCovered(bank, peak.logScale)) continue;
      readFilters(bank, peak.filter, family, peak.logScale, relativeResolution);
      if (seen.likelihood.count > 0) trials.push({ family, gain: templateGain() });
    }
    trials.sort((a, b) => b.gain - a.gain);
    const best = new Map<SuspectKind, number>();
    for (const { family } of trials.slice(0, 2)) {
      readFilters(bank, peak.filter, family, peak.logScale, relativeResolution);
      const score =
        Math.log(family.weight) + familyEvidence(seen.likelihood, seen.model, openReference(logNoiseFlux)).logEvidence;
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

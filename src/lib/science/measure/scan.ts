import { lineByName } from '../constants/lines';
import type { FilterBank } from './detect';
import { selectInPlace } from './order-statistics';
import { Scratch } from './scratch';
import { sumShifted, type ShiftedRow } from './shifted-sums';

/** A line of the scan: how much its absence costs and its presence brings. */
export interface ScanLine {
  logRest: number;
  /** Prior probability that it is there when its object is. */
  presence: number;
}

const scanLine = (name: string, presence: number): ScanLine => ({
  logRest: Math.log(lineByName(name).wavelengthVacuum),
  presence,
});

/** Narrow emission lines, strong ones first. */
export const NARROW_SCAN_LINES: readonly ScanLine[] = [
  scanLine('H-alpha 6565', 0.75),
  scanLine('[O III] 5008', 0.75),
  scanLine('[O II] 3730', 0.75),
  scanLine('H-beta 4863', 0.75),
  scanLine('Lyman-alpha 1216', 0.75),
  scanLine('[O III] 4960', 0.75),
  scanLine('[N II] 6585', 0.25),
  scanLine('[S II] 6718', 0.25),
  scanLine('[S II] 6733', 0.25),
  scanLine('[O II] 3727', 0.25),
  scanLine('H-gamma 4342', 0.25),
  scanLine('H-delta 4103', 0.25),
  scanLine('[Ne III] 3870', 0.25),
  scanLine('[O I] 6302', 0.25),
  scanLine('He I 5877', 0.25),
  scanLine('[N II] 6550', 0.25),
  scanLine('[S III] 9533', 0.25),
  scanLine('[S III] 9071', 0.25),
  scanLine('[Ar III] 7138', 0.25),
  scanLine('He I 10833', 0.25),
  scanLine('Paschen-beta 12822', 0.25),
  scanLine('Paschen-alpha 18756', 0.75),
  scanLine('C III] 1909', 0.25),
  scanLine('[C III] 1907', 0.25),
  scanLine('C IV 1548', 0.25),
  scanLine('C IV 1551', 0.25),
  scanLine('He II 1640', 0.25),
  scanLine('Mg II 2796', 0.25),
  scanLine('Mg II 2804', 0.25),
  scanLine('[Ne V] 3427', 0.25),
];

/** Broad permitted lines. */
export const BROAD_SCAN_LINES: readonly ScanLine[] = [
  scanLine('Lyman-alpha 1216', 0.75),
  scanLine('C IV 1548', 0.75),
  scanLine('C III] 1909', 0.75),
  scanLine('Mg II 2796', 0.75),
  scanLine('H-beta 4863', 0.75),
  scanLine('H-alpha 6565', 0.75),
  scanLine('H-gamma 4342', 0.25),
  scanLine('Si IV 1394', 0.25),
  scanLine('Paschen-beta 12822', 0.25),
];

/** A distinct redshift at which the lines add up. */
export interface ScanPeak {
  /** ln(1+z). */
  logScale: number;
  gain: number;
  /** Index of the filter (width) that gives the gain. */
  filter: number;
}

const scratch = {
  best: new Scratch(),
  total: new Scratch(),
  raw: new Scratch(),
  odds: new Scratch(),
  gains: [] as Scratch[],
};

/** One line adds no more than this, so that a single feature cannot outvote several. */
const GAIN_CAP = 60;

/**
 * Adds up, at every redshift, what each line of a list contributes, for every width, and returns the best distinct
 * redshifts. A line with significance s and prior presence p contributes ln(1 - p + p exp(b)), with
 * b = s^2 / 2 - ln(1 + 2.5 s) the log odds of a positive amplitude under a broad prior, capped; outside the data nothing.
 * Each node takes the best of itself and its neighbours, so that the sum bounds what a finer grid would give.
 *
 * @param sign +1 emission, -1 absorption
 * @param separationKms smallest distance of two peaks
 * @returns at most `limit` peaks, best first
 */
export function scanRedshifts(
  bank: FilterBank,
  lines: readonly ScanLine[],
  redshiftRange: readonly [number, number],
  limit: number,
  separationKms: number,
  sign: 1 | -1 = 1,
): ScanPeak[] {
  const { start, step } = bank;
  const firstNode = Math.floor(Math.log1p(redshiftRange[0]) / step);
  const lastNode = Math.ceil(Math.log1p(redshiftRange[1]) / step);
  const nodes = lastNode - firstNode + 1;
  if (nodes < 1) return [];
  const best = scratch.best.take(nodes).fill(-Infinity);
  const bestFilter = new Uint8Array(nodes);
  const total = scratch.total.take(nodes);
  const presences = [...new Set(lines.map((line) => line.presence))];
  while (scratch.gains.length < presences.length) scratch.gains.push(new Scratch());
  for (let f = 0; f < bank.filters.length; f++) {
    const { significance, information } = bank.filters[f];
    const odds = lineOdds(significance, information, sign);
    const rows: ShiftedRow[] = [];
    for (const [p, presence] of presences.entries()) {
      const values = lineGains(odds, information, presence, scratch.gains[p].take(odds.length));
      for (const line of lines) {
        if (line.presence !== presence) continue;
        // Node of the line's rest wavelength relative to the grid: observed node = redshift node + shift.
        rows.push({ values, shift: Math.round((line.logRest - start) / step) + firstNode });
      }
    }
    sumShifted(rows, total);
    keepBest(total, f, best, bestFilter);
  }
  return distinctPeaks(best, bestFilter, firstNode, step, limit, separationKms);
}

/** Raises `best` to `total` where that is higher, and notes the filter. */
function keepBest(total: Float64Array, filter: number, best: Float64Array, bestFilter: Uint8Array): void {
  for (let m = 0; m < total.length; m++) {
    if (total[m] > best[m]) {
      best[m] = total[m];
      bestFilter[m] = filter;
    }
  }
}

/** Odds exp(b) of a line of positive flux at every node, best of the node and its neighbours. */
function lineOdds(significance: Float64Array, information: Float64Array, sign: 1 | -1): Float64Array {
  const count = significance.length;
  const raw = scratch.raw.take(count);
  for (let k = 0; k < count; k++) {
    if (!(information[k] > 0)) continue;
    const s = Math.min(12, sign * significance[k]);
    raw[k] = s > 0 ? Math.exp(0.5 * s * s) / (1 + 2.5 * s) : Math.exp(-0.9 * Math.min(3, -s));
  }
  const odds = scratch.odds.take(count);
  for (let k = 0; k < count; k++) {
    let value = raw[k];
    if (k > 0 && raw[k - 1] > value) value = raw[k - 1];
    if (k < count - 1 && raw[k + 1] > value) value = raw[k + 1];
    odds[k] = value;
  }
  return odds;
}

/** What a line of given presence brings at every node, written into `gain`, which comes zeroed. */
function lineGains(odds: Float64Array, information: Float64Array, presence: number, gain: Float64Array): Float64Array {
  const absent = 1 - presence;
  let lastOdds = NaN;
  let lastGain = 0;
  for (let k = 0; k < odds.length; k++) {
    if (!(information[k] > 0)) continue;
    // Neighbours often share their odds (the best of three nodes), and so one logarithm.
    if (odds[k] !== lastOdds) {
      lastOdds = odds[k];
      lastGain = Math.min(GAIN_CAP, Math.log(absent + presence * lastOdds));
    }
    gain[k] = lastGain;
  }
  return gain;
}

/** Maxima looked at, best first: far more than are ever kept apart. */
const CONSIDERED = 400;

/** The `most` highest of the given nodes, in decreasing height. */
function bestOf(nodes: readonly number[], height: Float64Array, most: number): number[] {
  const byHeight = (a: number, b: number) => height[b] - height[a] || a - b;
  if (nodes.length <= most) return [...nodes].sort(byHeight);
  const heights = Float64Array.from(nodes, (m) => height[m]);
  const threshold = selectInPlace(heights, heights.length, heights.length - most);
  return nodes.filter((m) => height[m] >= threshold).sort(byHeight);
}

function distinctPeaks(
  total: Float64Array,
  filter: Uint8Array,
  firstNode: number,
  step: number,
  limit: number,
  separationKms: number,
): ScanPeak[] {
  const maxima: number[] = [];
  for (let m = 0; m < total.length; m++) {
    if (!(total[m] > 0)) continue;
    if ((m === 0 || total[m] >= total[m - 1]) && (m === total.length - 1 || total[m] > total[m + 1])) maxima.push(m);
  }
  const best = bestOf(maxima, total, CONSIDERED);
  const apart = separationKms / 299792.458 / step;
  const kept: number[] = [];
  for (const m of best) {
    if (kept.length >= limit) break;
    if (kept.every((other) => Math.abs(other - m) >= apart)) kept.push(m);
  }
  return kept.map((m) => {
    // A plateau made by taking the best of three nodes is centred by its own width.
    let to = m;
    while (to + 1 < total.length && total[to + 1] === total[m]) to++;
    let from = m;
    while (from > 0 && total[from - 1] === total[m]) from--;
    return { logScale: (firstNode + (from + to) / 2) * step, gain: total[m], filter: filter[m] };
  });
}

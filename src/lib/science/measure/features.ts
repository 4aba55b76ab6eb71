import { MASK } from '$lib/domain/spectrum';
import type { FilterBank, GridFilter } from './detect';
import { spikeAdvantage } from './cosmic-rays';
import { CONTINUUM_FAULT } from './continuum-fault';
import { lowerBound } from './noise';
import { Scratch } from './scratch';
import type { WorkingSpectrum } from './working-spectrum';

/** A bump that stands out, whatever made it. */
export interface Feature {
  /** Observed wavelength, vacuum barycentric ångström. */
  wavelength: number;
  logWavelength: number;
  significance: number;
  /** Index of the filter that sees it best. */
  filter: number;
  sigmaKms: number;
  /** Lies on a strong sky line or telluric band. */
  nearSky: boolean;
  /** Lies at the edge of a gap or of the data. */
  nearEdge: boolean;
  /** Significance before the filter's noise factor, continuum faults counted as noise. */
  bounded: number;
  /** How often something that is no line makes a feature here, per resolution element. */
  artefactRate: number;
  /** Clear of the sky, the spectrum has so many dips at this width that its continuum must be rough. */
  rough: boolean;
}

/**
 * How often something that is no line makes a feature, per resolution element, before the spectrum's own dips are
 * counted: clean sky, bad sky, edge, spikes.
 */
const ARTEFACT_RATE = { clean: 1e-6, sky: 2e-4, edge: 2e-4, spike: 1e-3 } as const;

const scratch = new Scratch();

/**
 * Local maxima of significance over all widths of a bank.
 *
 * @param threshold least significance
 * @returns features in decreasing significance, apart by at least their own width
 */
export function findFeatures(
  working: WorkingSpectrum,
  residual: Float64Array,
  continuum: Float64Array,
  bank: FilterBank,
  threshold: number,
): Feature[] {
  const { count, start, step, filters } = bank;
  const best = scratch.take(count);
  const which = new Uint8Array(count);
  filters.forEach((filter, f) => {
    for (let k = 0; k < count; k++) {
      if (filter.significance[k] > best[k]) {
        best[k] = filter.significance[k];
        which[k] = f;
      }
    }
  });
  const maxima: number[] = [];
  for (let k = 1; k < count - 1; k++) {
    if (best[k] >= threshold && best[k] >= best[k - 1] && best[k] > best[k + 1]) maxima.push(k);
  }
  maxima.sort((a, b) => best[b] - best[a] || a - b);
  const lobes = sideLobes(working, bank, maxima, best, which);
  const ratesOf = filters.map((filter) => artefactRates(working, bank, filter, lobes));
  const features: Feature[] = [];
  for (const k of maxima) {
    const logWavelength = start + k * step;
    const sigmaKms = filters[which[k]].sigmaKms;
    const wavelength = Math.exp(logWavelength);
    const pixel = Math.min(working.count - 1, lowerBound(working.wavelength, wavelength));
    const lsf = working.lsfSigma[pixel] / wavelength;
    const reach = 2.5 * Math.hypot(lsf, sigmaKms / 299792.458);
    if (features.some((other) => Math.abs(other.logWavelength - logWavelength) < reach)) continue;
    const { nearSky, nearEdge } = surroundings(working, pixel, wavelength, 1.2 * reach);
    const spike = spikeAdvantage(working, residual, highestPixel(working, residual, pixel));
    const rates = ratesOf[which[k]];
    const rate =
      (nearSky ? rates.sky : nearEdge ? Math.max(ARTEFACT_RATE.edge, rates.clean) : rates.clean) +
      ARTEFACT_RATE.spike * Math.exp(Math.max(-30, Math.min(30, 0.5 * spike.advantage)));
    const { noiseFactor, information } = filters[which[k]];
    const spread = wavelength * (reach / 2.5);
    const s = bounded(best[k] * noiseFactor, information[k] * noiseFactor ** 2, continuum[pixel], spread);
    features.push({
      wavelength,
      logWavelength,
      significance: best[k],
      filter: which[k],
      sigmaKms,
      nearSky,
      nearEdge,
      bounded: s,
      artefactRate: rate,
      rough: rates.clean > ROUGH_RATE,
    });
    if (features.length >= 60) break;
  }
  return features;
}

/** How far from a bump a deeper dip makes it a shoulder, in ln(wavelength): 2,500 km/s. */
const SHOULDER_REACH = 0.0083;

/** Whether a bump is only what deep absorption beside it leaves of the continuum: the dip stands out more than the bump. */
export function isShoulder(feature: Feature, { start, step, count, filters }: FilterBank): boolean {
  const { significance } = filters[feature.filter];
  const from = Math.max(0, Math.floor((feature.logWavelength - SHOULDER_REACH - start) / step));
  const to = Math.min(count - 1, Math.ceil((feature.logWavelength + SHOULDER_REACH - start) / step));
  for (let k = from; k <= to; k++) if (significance[k] < -feature.significance) return true;
  return false;
}

/**
 * Log odds that something that is no line made a bump of a given significance, against nothing there: a height
 * log-uniform over a factor of 1,000, times the rate of such bumps.
 */
export function artefactLogOdds(feature: Feature, significance: number): number {
  const s = Math.max(1, significance);
  return softPlus(Math.log(feature.artefactRate) + 0.5 * s * s - Math.log((s * Math.log(1000)) / 2.507));
}

/** Rate of clean artefacts from which on a continuum counts as rough. */
const ROUGH_RATE = 5e-3;

/** No rate of artefacts is taken higher than this. */
const HIGHEST_RATE = 0.03;

/** Significance with the faults of the continuum counted as noise (see `CONTINUUM_FAULT`). */
function bounded(significance: number, information: number, level: number, sigmaAngstrom: number): number {
  const fault = (CONTINUUM_FAULT[0] * level * 2.3548 * sigmaAngstrom) ** 2 * information;
  return significance / Math.sqrt(1 + fault);
}

/** ln(1 + exp(x)). */
function softPlus(x: number): number {
  return x > 30 ? x : Math.log1p(Math.exp(x));
}

function surroundings(
  working: WorkingSpectrum,
  pixel: number,
  wavelength: number,
  logReach: number,
): { nearSky: boolean; nearEdge: boolean } {
  const half = wavelength * logReach;
  let sky = 0;
  let bad = 0;
  let seen = 0;
  for (let i = pixel; i >= 0 && wavelength - working.wavelength[i] < half; i--) tally(i);
  for (let i = pixel + 1; i < working.count && working.wavelength[i] - wavelength < half; i++) tally(i);
  const reachesEnd =
    working.wavelength[0] > wavelength - half || working.wavelength[working.count - 1] < wavelength + half;
  return { nearSky: sky > 0.2 * seen, nearEdge: reachesEnd || bad > 0.15 * seen };

  function tally(i: number): void {
    seen++;
    if (!(working.weight[i] > 0)) bad++;
    if (working.mask[i] & (MASK.skyLine | MASK.telluric)) sky++;
  }
}

/** Nodes in the side lobes of strong features, whose dips say nothing of the noise. */
function sideLobes(
  working: WorkingSpectrum,
  bank: FilterBank,
  maxima: readonly number[],
  best: Float64Array,
  which: Uint8Array,
): Uint8Array {
  const lobes = new Uint8Array(bank.count);
  const middle = working.count >> 1;
  const lsf = working.lsfSigma[middle] / working.wavelength[middle];
  for (const k of maxima) {
    if (best[k] < 7) break;
    const sigma = Math.hypot(lsf, bank.filters[which[k]].sigmaKms / 299792.458, 350 / 299792.458);
    const reach = Math.ceil((7 * sigma) / bank.step);
    lobes.fill(1, Math.max(0, k - reach), Math.min(bank.count, k + reach + 1));
  }
  return lobes;
}

/**
 * Rates of artefacts from the spectrum itself, for one width: faults of noise and sky subtraction make dips as often as
 * bumps, so dips beyond 4.5 sigma, counted in and out of sky pixels, tell how many bumps to expect. Dips on a bright
 * continuum may be stellar absorption and are counted all the same: they then only make the engine more careful.
 */
function artefactRates(
  working: WorkingSpectrum,
  bank: FilterBank,
  filter: GridFilter,
  lobes: Uint8Array,
): { clean: number; sky: number } {
  const { count, start, step } = bank;
  // Clean pixels, then those of the sky.
  const elements = [1, 1];
  const dips = [0, 0];
  const middle = working.count >> 1;
  const resolution = Math.hypot(working.lsfSigma[middle] / working.wavelength[middle], filter.sigmaKms / 299792.458);
  const perNode = step / (2.3548 * resolution);
  let pixel = 0;
  const ratio = Math.exp(step);
  let wavelength = Math.exp(start);
  for (let k = 1; k < count - 1; k++) {
    wavelength *= ratio;
    if (!(filter.information[k] > 0) || lobes[k]) continue;
    while (pixel < working.count - 1 && working.edges[pixel + 1] <= wavelength) pixel++;
    const place = working.mask[pixel] & (MASK.skyLine | MASK.telluric) ? 1 : 0;
    elements[place] += Math.min(1, perNode);
    const s = filter.significance[k];
    if (s < -4.5 && s <= filter.significance[k - 1] && s < filter.significance[k + 1]) dips[place]++;
  }
  return {
    clean: Math.max(ARTEFACT_RATE.clean, Math.min(HIGHEST_RATE, Math.max(0, dips[0] - 1) / elements[0])),
    sky: Math.max(ARTEFACT_RATE.sky, Math.min(HIGHEST_RATE, (dips[1] + 0.3) / elements[1])),
  };
}

function highestPixel(working: WorkingSpectrum, residual: Float64Array, pixel: number): number {
  let best = pixel;
  for (let i = Math.max(0, pixel - 2); i <= Math.min(working.count - 1, pixel + 2); i++) {
    if (working.weight[i] > 0 && !(residual[i] <= residual[best] && working.weight[best] > 0)) best = i;
  }
  return best;
}

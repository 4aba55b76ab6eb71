import { MASK } from '$lib/domain/spectrum';
import { COMPONENTS_OF_KIND, misfitScale, type FittedCandidate } from './candidate-fit';
import type { FilterBank } from './detect';
import { continuumFault } from './continuum-fault';
import { componentShifts, type ComponentShift } from './fit/component-shifts';
import { FULL_COMPONENTS, stellarBalmer, type LineComponent } from './fit/components';
import type { FitData } from './fit/fit-windows';
import { fitErrors, type FitErrors } from './fit/fit-errors';
import { jointFit, type JointFit } from './fit/joint-fit';
import { pixelOf } from './fit/line-profile';
import { lymanAlphaPeak } from './lyman-alpha';
import type { PreparedSpectrum } from './prepare';
import type { WorkingSpectrum } from './working-spectrum';

/** The answer's fit at full depth. */
export interface FinalFit {
  fit: JointFit;
  errors: FitErrors;
  /** What errors are multiplied by. */
  errorScale: number;
  /** ln(1+z) that is reported: that of the fit, or of Lyman-alpha's peak. */
  logScale: number;
  lyman: { fwhmKms: number; wingShare: number } | null;
  /** Quasars and windy active nuclei alone: each component's own shift. */
  shifts: ComponentShift[] | null;
  /** Quasars alone: ln(1+z) of the whole spectrum. */
  wholeLogScale: number | null;
}

const FULL_NARROW = FULL_COMPONENTS.filter((component) => component.name !== 'Lyman-alpha 1216');

function componentsFor(kind: FittedCandidate['kind']): readonly LineComponent[] {
  return kind === 'narrow' ? FULL_NARROW : COMPONENTS_OF_KIND[kind];
}

/**
 * Fits a candidate again with every line of its kind, to convergence.
 *
 * @param data with the spectrum's plain weights
 * @param continuum flexible continuum, for stellar absorption under the Balmer lines
 * @param continuum flexible continuum, for stellar absorption under the Balmer lines
 * @param noiseFactor measured noise over declared noise
 */
export function finalFit(
  data: FitData,
  continuum: Float64Array,
  noiseFactor: number,
  candidate: FittedCandidate,
  steps: number,
): FinalFit {
  const start = { logScale: candidate.fit.logScale, sigmaKms: candidate.fit.sigmaKms };
  const fit =
    jointFit(data, withStars(componentsFor(candidate.kind), data, continuum, candidate), start, steps) ?? candidate.fit;
  const errors = fitErrors(fit);
  const errorScale = misfitScale(fit, noiseFactor);
  if (candidate.kind !== 'lyman') {
    const scattered = candidate.kind === 'broad' || isActive(candidate, fit);
    const shifts = scattered ? componentShifts(data, fit) : null;
    return { fit, errors, errorScale, logScale: fit.logScale, lyman: null, shifts, wholeLogScale: null };
  }
  const peak = lymanAlphaPeak(data, fit);
  return { fit, errors, errorScale, logScale: peak.logScale, lyman: peak, shifts: null, wholeLogScale: null };
}

/** Continuum signal-to-noise a pixel from which on stellar absorption is fitted; below, its effect hides in the noise. */
const STELLAR_SIGNAL = 4;

/** Adds stellar Balmer absorption to narrow lines where the continuum is bright enough to show it. */
function withStars(
  components: readonly LineComponent[],
  data: FitData,
  continuum: Float64Array,
  candidate: FittedCandidate,
): readonly LineComponent[] {
  if (candidate.kind !== 'narrow') return components;
  const stretch = Math.exp(candidate.fit.logScale);
  let bright = false;
  const level = (wavelength: number) => {
    if (wavelength < data.wavelength[0] || wavelength > data.wavelength[data.count - 1]) return 0;
    const pixel = pixelOf(data.edges, wavelength);
    if (continuum[pixel] * Math.sqrt(data.weight[pixel]) > STELLAR_SIGNAL) bright = true;
    return Math.max(0, continuum[pixel]);
  };
  const stars = stellarBalmer(level, stretch);
  return stars && bright ? [...components, stars] : components;
}

/** Lines of an active nucleus wider than this (FWHM, km/s) have wings and winds that pull them about. */
const WINDY_FWHM_KMS = 350;

function isActive(candidate: FittedCandidate, fit: JointFit): boolean {
  return candidate.family.objectClass === 'active nucleus' && 2.3548 * fit.sigmaKms[0] > WINDY_FWHM_KMS;
}

/** A candidate's own fit in the form of a final one. */
export function asFinal(candidate: FittedCandidate): FinalFit {
  const { fit, errors, noiseFactor } = candidate;
  return {
    fit,
    errors,
    errorScale: noiseFactor,
    logScale: fit.logScale,
    lyman: null,
    shifts: null,
    wholeLogScale: null,
  };
}

/** Significance of a bank's best-matching narrow filter at an observed wavelength; 0 outside. */
export function significanceAt(bank: FilterBank, wavelength: number, sigmaKms: number): number {
  const filter = bank.filters.reduce((best, next) =>
    Math.abs(Math.log(next.sigmaKms / sigmaKms)) < Math.abs(Math.log(best.sigmaKms / sigmaKms)) ? next : best,
  );
  const node = (Math.log(wavelength) - bank.start) / bank.step;
  const k = Math.round(node);
  let best = 0;
  for (let j = Math.max(0, k - 1); j <= Math.min(bank.count - 1, k + 1); j++)
    best = Math.max(best, filter.significance[j]);
  return best;
}

/** What speaks for a fit, line by line. */
export interface LineSupport {
  name: string;
  significance: number;
  wavelengthObserved: number;
  /** Lies under a strong sky line or in a telluric band. */
  nearSky: boolean;
  narrow: boolean;
}

/**
 * Lines of signal-to-noise 4 or more from different transitions: each in the joint fit and, on its own, in the filter
 * (3 sigma); tied lines count when the filter sees them, an unresolved doublet counts once.
 */
export function supportingLines(final: FinalFit, bank: FilterBank, prepared: PreparedSpectrum): LineSupport[] {
  const { working, stiffContinuum } = prepared;
  const { fit, errors } = final;
  const support: LineSupport[] = [];
  fit.components.forEach((component, i) => {
    const error = errors.amplitude[i] * final.errorScale;
    const rest = component.members[0].rest;
    const fault = component.width === 1 ? continuumFault(working, stiffContinuum, fit, rest, 1) : 0;
    const significance = fit.amplitude[i] / Math.sqrt(error * error + fault);
    if (!(significance >= 4) || component.name.startsWith('Lyman-alpha red') || component.auxiliary) return;
    for (const member of component.members) {
      const wavelengthObserved = member.rest * Math.exp(fit.logScale);
      const width = component.width === 1 ? 350 : fit.sigmaKms[0];
      const own = significanceAt(bank, wavelengthObserved, width);
      const needed = component.width === 1 ? -Infinity : member === component.members[0] ? 3 : 4;
      if (own < needed) continue;
      const merged = support.some(
        (other) =>
          Math.abs(Math.log(other.wavelengthObserved / wavelengthObserved)) < mergeDistance(fit, component.width),
      );
      if (!merged)
        support.push({
          name: member.entry.name,
          significance: significance * member.share,
          wavelengthObserved,
          nearSky: nearSky(working, wavelengthObserved),
          narrow: component.width === 0,
        });
    }
  });
  return support;
}

/** Lines nearer than this (in ln wavelength) can't be told to be two. */
function mergeDistance(fit: JointFit, width: 0 | 1): number {
  return width === 1 ? 0.02 : Math.max(350, 2.5 * fit.sigmaKms[0]) / 299792.458;
}

function nearSky(working: WorkingSpectrum, wavelength: number): boolean {
  const pixel = pixelOf(working.edges, wavelength);
  for (let i = Math.max(0, pixel - 1); i <= Math.min(working.count - 1, pixel + 1); i++) {
    if (working.mask[i] & (MASK.skyLine | MASK.telluric)) return true;
  }
  return false;
}

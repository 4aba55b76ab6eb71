import type { LineFit } from '$lib/domain/measurement';
import { FWHM_PER_SIGMA } from '../constants/physical';
import { sigmaOf } from './fit/components';
import type { FitErrors } from './fit/fit-errors';
import type { FitData, FitWindow } from './fit/fit-windows';
import type { JointFit } from './fit/joint-fit';
import { addLineProfile, pixelOf } from './fit/line-profile';
import { LYMAN_PROFILE_COMPONENTS } from './lyman-alpha';

/** What line fits are reported in. */
export interface LineFitScale {
  /** Flux unit of the spectrum for one unit of the working flux. */
  flux: number;
  /** What errors are multiplied by. */
  errors: number;
}

/**
 * Lines of a joint fit as reported: every covered line whose significance reaches `threshold`, tied lines one by one.
 * Equivalent widths use the local continuum of the fit's own window, its error and its covariance with the flux.
 *
 * @param lyman whether the leading components are one Lyman-alpha profile
 * @param shiftTo ln(1+z) at which observed wavelengths are given; that of the fit where left out
 */
export function lineFitsOf(
  data: FitData,
  fit: JointFit,
  errors: FitErrors,
  scale: LineFitScale,
  threshold: number,
  lyman: boolean,
  shiftTo: number = fit.logScale,
): LineFit[] {
  const n = fit.components.length;
  const lines: LineFit[] = [];
  const skip = lyman ? LYMAN_PROFILE_COMPONENTS : 0;
  fit.components.forEach((component, i) => {
    if (!(fit.gram[i * n + i] > 0) || (i > 0 && i < skip) || component.auxiliary) return;
    const group = i === 0 && lyman ? Array.from({ length: skip }, (_, k) => k) : [i];
    let flux = 0;
    let variance = 0;
    for (const a of group) {
      flux += fit.amplitude[a];
      for (const b of group) variance += errors.covariance[a * n + b];
    }
    const own = Math.sqrt(variance > 0 ? variance : errors.amplitude[i] ** 2) * scale.errors;
    const significance = flux / own;
    if (!(significance >= threshold)) return;
    const sigmaKms = fit.sigmaKms[component.width];
    const widthError = errors.logSigma[component.width];
    const stretch = Math.exp(shiftTo);
    for (const member of component.members) {
      const centre = member.rest * Math.exp(fit.logScale);
      const window = fit.windows.find((w) => centre >= data.edges[w.from] && centre <= data.edges[w.to]);
      if (!window) continue;
      const width = equivalentWidth(data, fit, errors, window, group, member.share, centre, scale.errors);
      lines.push({
        line: member.entry.name,
        wavelengthRest: member.entry.wavelengthVacuum,
        wavelengthObserved: member.rest * stretch,
        flux: flux * member.share * scale.flux,
        fluxError: own * member.share * scale.flux,
        equivalentWidthRest: width.value,
        equivalentWidthRestError: width.error,
        fwhmKms: FWHM_PER_SIGMA * sigmaKms,
        fwhmKmsError: Number.isFinite(widthError) ? FWHM_PER_SIGMA * sigmaKms * widthError * scale.errors : null,
        signalToNoise: significance,
      });
    }
  });
  return lines.sort((a, b) => a.wavelengthRest - b.wavelengthRest);
}

/** Local continuum of a window at a pixel: value, variance, and its response to every component's flux. */
function continuumAt(
  data: FitData,
  fit: JointFit,
  window: FitWindow,
  pixel: number,
): { level: number; variance: number; response: Map<number, number> } {
  const at = pixel - window.from;
  const length = window.to - window.from;
  const response = new Map<number, number>();
  let level = 0;
  let variance = 0;
  window.basis.forEach((row, k) => {
    level += row[at] * window.fluxOnBasis[k];
    variance += row[at] ** 2;
  });
  const stretch = Math.exp(fit.logScale);
  for (const c of window.components) {
    const profile = new Float64Array(length);
    const component = fit.components[c];
    for (const member of component.step ? [] : component.members) {
      const sigma = sigmaOf(component, fit.sigmaKms);
      addLineProfile(data, member.rest * stretch, sigma, member.share, window.from, length, profile, null, null);
    }
    let sum = 0;
    for (const row of window.basis) {
      let dot = 0;
      for (let i = 0; i < length; i++) dot += data.weight[window.from + i] * row[i] * profile[i];
      sum += row[at] * dot;
    }
    response.set(c, sum);
    level -= fit.amplitude[c] * sum;
  }
  return { level, variance, response };
}

/** EW = F / (C (1+z)), its error by propagation through the flux, the continuum, and what each flux takes from it. */
function equivalentWidth(
  data: FitData,
  fit: JointFit,
  errors: FitErrors,
  window: FitWindow,
  group: number[],
  share: number,
  centre: number,
  errorScale: number,
): { value: number | null; error: number | null } {
  const n = fit.components.length;
  const pixel = Math.min(window.to - 1, Math.max(window.from, pixelOf(data.edges, centre)));
  const { level, variance, response } = continuumAt(data, fit, window, pixel);
  const levelError = Math.sqrt(variance) * errorScale;
  if (!(level > 2 * levelError)) return { value: null, error: null };
  const flux = share * group.reduce((sum, a) => sum + fit.amplitude[a], 0);
  const derivative = new Float64Array(n);
  for (const a of group) derivative[a] += share / level;
  for (const [c, q] of response) derivative[c] += (flux * q) / (level * level);
  let total = (flux * flux * variance) / level ** 4;
  for (let a = 0; a < n; a++) {
    for (let b = 0; b < n; b++) total += derivative[a] * errors.covariance[a * n + b] * derivative[b];
  }
  const stretch = Math.exp(fit.logScale);
  return { value: flux / (level * stretch), error: (Math.sqrt(Math.max(0, total)) * errorScale) / stretch };
}

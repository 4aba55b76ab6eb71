import type { Spectrum } from '$lib/domain/spectrum';
import { FWHM_PER_SIGMA, SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';
import { normalCumulative } from '$lib/science/measure/normal-distribution';

function firstEdgeAbove(edges: Float64Array, wavelength: number): number {
  let low = 0;
  let high = edges.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (edges[middle] > wavelength) high = middle;
    else low = middle + 1;
  }
  return low;
}

/**
 * Standard error of the flux of a line of known place and width, with a constant continuum under it free.
 *
 * With profile p (flux density of unit flux, integrated over pixels) and weights w = 1 / variance over ten sigma to either side:
 * 1 / error^2 = sum w p^2 - (sum w p)^2 / sum w.
 *
 * @param spectrum where the line would be
 * @param wavelengthObserved vacuum ångström, barycentric
 * @param fwhmKms intrinsic FWHM
 * @returns flux unit times ångström; null where less than half of the line falls on usable pixels
 */
export function lineFluxError(spectrum: Spectrum, wavelengthObserved: number, fwhmKms: number): number | null {
  const { edges, variance, lsfSigma } = spectrum;
  const nearest = Math.min(lsfSigma.length - 1, Math.max(0, firstEdgeAbove(edges, wavelengthObserved) - 1));
  const intrinsic = (wavelengthObserved * fwhmKms) / FWHM_PER_SIGMA / SPEED_OF_LIGHT_KMS;
  const sigma = Math.hypot(intrinsic, lsfSigma[nearest]);
  if (!(sigma > 0)) return null;
  const first = Math.max(0, firstEdgeAbove(edges, wavelengthObserved - 10 * sigma) - 1);
  let profileSquares = 0;
  let profileSum = 0;
  let weights = 0;
  let covered = 0;
  for (let i = first; i < variance.length && edges[i] < wavelengthObserved + 10 * sigma; i++) {
    if (!(variance[i] > 0) || variance[i] === Infinity) continue;
    const share =
      normalCumulative((edges[i + 1] - wavelengthObserved) / sigma) -
      normalCumulative((edges[i] - wavelengthObserved) / sigma);
    const p = share / (edges[i + 1] - edges[i]);
    const w = 1 / variance[i];
    profileSquares += w * p * p;
    profileSum += w * p;
    weights += w;
    covered += share;
  }
  const information = profileSquares - (profileSum * profileSum) / weights;
  return covered >= 0.5 && information > 0 ? 1 / Math.sqrt(information) : null;
}

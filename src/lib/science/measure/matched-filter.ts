import { SPEED_OF_LIGHT_KMS } from '../constants/physical';
import { normalCumulative } from './normal-distribution';

/** Pixels that share one kernel: the line-spread function varies slowly. */
const BLOCK = 128;

/** Input of the filter: residual after the continuum, its weights, and the pixel grid. */
export interface FilterInput {
  count: number;
  wavelength: Float64Array;
  edges: Float64Array;
  residual: Float64Array;
  weight: Float64Array;
  lsfSigma: Float64Array;
}

/** Output: flux = numerator / information, with standard error 1 / sqrt(information), at every pixel. */
export interface FilterOutput {
  numerator: Float64Array;
  information: Float64Array;
  /** Total sigma of the kernel in pixels, at every block's middle. */
  sigmaPixels: number;
}

/**
 * Matched filter with a pixel-integrated Gaussian of given intrinsic velocity sigma, broadened by the line-spread
 * function, and a local constant marginalised.
 *
 * With kernel k (unit flux), weights w, residual r, over +-3 sigma plus a margin:
 * numerator = S(wkr) - S(wk) S(wr) / S(w), information = S(wkk) - S(wk)^2 / S(w).
 *
 * @param sigmaKms intrinsic velocity sigma, km/s
 * @returns arrays of one value a pixel; information is 0 where no usable pixel lies under the kernel
 * Source: Turin (1960, IRE Trans. IT-6, 311) for the filter; the constant's elimination is ordinary least squares.
 */
export function matchedFilter(input: FilterInput, sigmaKms: number): FilterOutput {
  const { count, wavelength, edges, residual, weight, lsfSigma } = input;
  const numerator = new Float64Array(count);
  const information = new Float64Array(count);
  const sumWeight = new Float64Array(count + 1);
  const sumResidual = new Float64Array(count + 1);
  const weighted = new Float64Array(count);
  for (let i = 0; i < count; i++) {
    weighted[i] = weight[i] * residual[i];
    sumWeight[i + 1] = sumWeight[i] + weight[i];
    sumResidual[i + 1] = sumResidual[i] + weighted[i];
  }
  let kernel = new Float64Array(64);
  let middleSigma = 1;
  for (let start = 0; start < count; start += BLOCK) {
    const end = Math.min(count, start + BLOCK);
    const middle = (start + end) >> 1;
    const pixel = edges[middle + 1] - edges[middle];
    const intrinsic = (wavelength[middle] * sigmaKms) / SPEED_OF_LIGHT_KMS;
    const sigma = Math.sqrt(lsfSigma[middle] ** 2 + intrinsic * intrinsic) / pixel;
    if (start <= count / 2) middleSigma = sigma;
    const reach = Math.max(2, Math.ceil(3.2 * sigma));
    const width = 2 * reach + 1;
    if (kernel.length < width) kernel = new Float64Array(2 * width);
    for (let t = 0; t < width; t++) {
      const x = t - reach;
      kernel[t] = (normalCumulative((x + 0.5) / sigma) - normalCumulative((x - 0.5) / sigma)) / pixel;
    }
    const margin = reach + Math.max(4, reach);
    for (let j = start; j < end; j++) {
      const from = Math.max(0, j - reach);
      const to = Math.min(count - 1, j + reach);
      let kr = 0;
      let kk = 0;
      let k1 = 0;
      for (let i = from, t = from - j + reach; i <= to; i++, t++) {
        const k = kernel[t];
        const wk = weight[i] * k;
        kr += weighted[i] * k;
        kk += wk * k;
        k1 += wk;
      }
      const a = Math.max(0, j - margin);
      const b = Math.min(count, j + margin + 1);
      const total = sumWeight[b] - sumWeight[a];
      if (!(total > 0) || !(kk > 0)) continue;
      const ratio = k1 / total;
      const info = kk - k1 * ratio;
      // Where nearly all of the kernel is lost to the constant (edge of a gap) nothing can be said.
      if (info > 0.02 * kk) {
        numerator[j] = kr - ratio * (sumResidual[b] - sumResidual[a]);
        information[j] = info;
      }
    }
  }
  return { numerator, information, sigmaPixels: middleSigma };
}

/**
 * Rebins filter input by whole groups of pixels, inverse-variance weighted, for kernels much wider than a pixel.
 *
 * @param factor pixels a group, at least 1
 */
export function rebinFilterInput(input: FilterInput, factor: number): FilterInput {
  if (factor <= 1) return input;
  const count = Math.ceil(input.count / factor);
  const wavelength = new Float64Array(count);
  const edges = new Float64Array(count + 1);
  const residual = new Float64Array(count);
  const weight = new Float64Array(count);
  const lsfSigma = new Float64Array(count);
  for (let b = 0; b < count; b++) {
    const from = b * factor;
    const to = Math.min(input.count, from + factor);
    edges[b] = input.edges[from];
    edges[b + 1] = input.edges[to];
    wavelength[b] = 0.5 * (edges[b] + edges[b + 1]);
    lsfSigma[b] = input.lsfSigma[(from + to) >> 1] ?? input.lsfSigma[from];
    let total = 0;
    let sum = 0;
    for (let i = from; i < to; i++) {
      total += input.weight[i];
      sum += input.weight[i] * input.residual[i];
    }
    weight[b] = total;
    residual[b] = total > 0 ? sum / total : 0;
  }
  return { count, wavelength, edges, residual, weight, lsfSigma };
}

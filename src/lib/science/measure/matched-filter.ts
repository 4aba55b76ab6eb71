import { SPEED_OF_LIGHT_KMS } from '../constants/physical';
import { tabulatedCumulative } from './fit/gaussian-table';
import { Scratch } from './scratch';

const scratch = { sumWeight: new Scratch(), sumResidual: new Scratch(), weighted: new Scratch() };

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
 * @param numerator zeros, a value a pixel, to write into; likewise `information`
 * @returns arrays of one value a pixel; information is 0 where no usable pixel lies under the kernel
 * Source: Turin (1960, IRE Trans. IT-6, 311) for the filter; the constant's elimination is ordinary least squares.
 */
export function matchedFilter(
  input: FilterInput,
  sigmaKms: number,
  numerator: Float64Array = new Float64Array(input.count),
  information: Float64Array = new Float64Array(input.count),
): FilterOutput {
  const { count, wavelength, edges, residual, weight, lsfSigma } = input;
  const sumWeight = scratch.sumWeight.take(count + 1);
  const sumResidual = scratch.sumResidual.take(count + 1);
  const weighted = scratch.weighted.take(count);
  for (let i = 0; i < count; i++) {
    weighted[i] = weight[i] * residual[i];
    sumWeight[i + 1] = sumWeight[i] + weight[i];
    sumResidual[i + 1] = sumResidual[i] + weighted[i];
  }
  let kernel = new Float64Array(64);
  const sums = new Float64Array(6);
  let middleSigma = 1;
  for (let start = 0; start < count; start += BLOCK) {
    const end = Math.min(count, start + BLOCK);
    const middle = (start + end) >> 1;
    const pixel = edges[middle + 1] - edges[middle];
    const intrinsic = (wavelength[middle] * sigmaKms) / SPEED_OF_LIGHT_KMS;
    const sigma = Math.sqrt(lsfSigma[middle] ** 2 + intrinsic * intrinsic) / pixel;
    if (start <= count / 2) middleSigma = sigma;
    const reach = Math.max(2, Math.ceil(3.2 * sigma));
    if (kernel.length < 2 * reach + 3) kernel = new Float64Array(4 * reach + 6);
    fillKernel(kernel, reach, sigma, pixel);
    const margin = reach + Math.max(4, reach);
    for (let j = start; j < end; j += 2) {
      correlatePair(kernel, reach, weight, weighted, count, j, sums);
      for (let p = 0; p < 2 && j + p < end; p++) {
        const kr = sums[3 * p];
        const kk = sums[3 * p + 1];
        const a = Math.max(0, j + p - margin);
        const b = Math.min(count, j + p + margin + 1);
        const total = sumWeight[b] - sumWeight[a];
        if (!(total > 0) || !(kk > 0)) continue;
        const ratio = sums[3 * p + 2] / total;
        const info = kk - sums[3 * p + 2] * ratio;
        // Where nearly all of the kernel is lost to the constant (edge of a gap) nothing can be said.
        if (info > 0.02 * kk) {
          numerator[j + p] = kr - ratio * (sumResidual[b] - sumResidual[a]);
          information[j + p] = info;
        }
      }
    }
  }
  return { numerator, information, sigmaPixels: middleSigma };
}

/**
 * Fills a kernel of 2 reach + 1 pixels with the share of a Gaussian's flux in each, per ångström, and a zero on either
 * side. Neighbours share an edge, and edges on both sides of the middle lie equally far from it.
 */
function fillKernel(kernel: Float64Array, reach: number, sigma: number, pixel: number): void {
  const last = 2 * reach + 2;
  kernel[0] = 0;
  kernel[last] = 0;
  let outer = tabulatedCumulative(-(reach + 0.5) / sigma);
  for (let x = reach; x > 0; x--) {
    const inner = tabulatedCumulative(-(x - 0.5) / sigma);
    const share = (inner - outer) / pixel;
    kernel[reach + 1 - x] = share;
    kernel[reach + 1 + x] = share;
    outer = inner;
  }
  kernel[reach + 1] = (1 - outer - outer) / pixel;
}

/**
 * Sums of w k r, w k k and w k for the pixels j and j + 1, side by side: both read the same pixels, the second with the
 * kernel one step behind, where its zeros add nothing.
 *
 * @param sums written: three for j, three for j + 1
 */
function correlatePair(
  kernel: Float64Array,
  reach: number,
  weight: Float64Array,
  weighted: Float64Array,
  count: number,
  j: number,
  sums: Float64Array,
): void {
  const from = Math.max(0, j - reach);
  const to = Math.min(count - 1, j + 1 + reach);
  let kr = 0;
  let kk = 0;
  let k1 = 0;
  let nextKr = 0;
  let nextKk = 0;
  let nextK1 = 0;
  let t = from - j + reach + 1;
  let behind = kernel[t - 1];
  for (let i = from; i <= to; i++, t++) {
    const k = kernel[t];
    const w = weight[i];
    const r = weighted[i];
    const wk = w * k;
    kr += r * k;
    kk += wk * k;
    k1 += wk;
    const nextWk = w * behind;
    nextKr += r * behind;
    nextKk += nextWk * behind;
    nextK1 += nextWk;
    behind = k;
  }
  sums[0] = kr;
  sums[1] = kk;
  sums[2] = k1;
  sums[3] = nextKr;
  sums[4] = nextKk;
  sums[5] = nextK1;
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

/** Arrays of one spectrum on its own pixels, barycentric vacuum ångström. */
export interface RebinInput {
  /** Pixel edges, n + 1, rising. */
  edges: Float64Array;
  flux: Float64Array;
  /** Infinity where the pixel is unusable. */
  variance: Float64Array;
  lsfSigma: Float64Array;
}

export interface Rebinned {
  /** Mean flux density of what falls into each new pixel; NaN where less than half of it is covered by usable pixels. */
  flux: Float64Array;
  /** Its variance; Infinity where there is none. */
  variance: Float64Array;
  /** Covariance with the next pixel: neighbours share the old pixels that straddle their edge. n values, the last 0. */
  covarianceWithNext: Float64Array;
  lsfSigma: Float64Array;
}

/** A new pixel needs this share of its width covered by usable old ones. */
const COVERED = 0.5;

/**
 * Puts a spectrum onto new pixels by overlap, which conserves flux: F_k = sum_i f_i o_ik / sum_i o_ik, where o_ik is the
 * width that old pixel i and new pixel k share. Old pixels are taken as independent, so
 * var F_k = sum_i v_i o_ik^2 / (sum_i o_ik)^2 and cov(F_k, F_k+1) = sum_i v_i o_ik o_i,k+1 / (O_k O_k+1).
 *
 * @param edges m + 1 edges of the new pixels, rising
 * @returns m values each; NaN and Infinity where nothing usable covers a new pixel.
 */
export function rebinSpectrum({ edges: old, flux, variance, lsfSigma }: RebinInput, edges: Float64Array): Rebinned {
  const count = edges.length - 1;
  const out: Rebinned = {
    flux: new Float64Array(count).fill(NaN),
    variance: new Float64Array(count).fill(Infinity),
    covarianceWithNext: new Float64Array(count),
    lsfSigma: new Float64Array(count).fill(NaN),
  };
  const covered = new Float64Array(count);
  let first = 0;
  for (let k = 0; k < count; k++) {
    const [low, high] = [edges[k], edges[k + 1]];
    while (first < flux.length && old[first + 1] <= low) first++;
    let [sum, square, sigma] = [0, 0, 0];
    for (let i = first; i < flux.length && old[i] < high; i++) {
      if (!usable(flux[i], variance[i])) continue;
      const share = Math.min(high, old[i + 1]) - Math.max(low, old[i]);
      covered[k] += share;
      sum += flux[i] * share;
      square += variance[i] * share * share;
      sigma += lsfSigma[i] * share;
    }
    if (covered[k] < COVERED * (high - low)) {
      covered[k] = 0;
      continue;
    }
    out.flux[k] = sum / covered[k];
    out.variance[k] = square / covered[k] ** 2;
    out.lsfSigma[k] = sigma / covered[k];
  }
  // Old pixels that straddle an edge between two new ones.
  let i = 0;
  for (let k = 0; k + 1 < count; k++) {
    const edge = edges[k + 1];
    while (i < flux.length && old[i + 1] <= edge) i++;
    if (i >= flux.length || old[i] >= edge || covered[k] === 0 || covered[k + 1] === 0) continue;
    if (!usable(flux[i], variance[i])) continue;
    const left = edge - Math.max(edges[k], old[i]);
    const right = Math.min(edges[k + 2], old[i + 1]) - edge;
    out.covarianceWithNext[k] = (variance[i] * left * right) / (covered[k] * covered[k + 1]);
  }
  return out;
}

const usable = (flux: number, variance: number) => Number.isFinite(flux) && variance > 0 && Number.isFinite(variance);

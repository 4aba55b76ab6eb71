/**
 * Inverse-variance weighted Gaussian smoothing: sum(g w f) / sum(g w) over neighbours up to three sigma.
 * Unusable pixels (error not positive or not finite) lend nothing and stay as they are.
 * @param sigmaPixels width of the Gaussian in pixels
 */
export function smoothInverseVariance(flux: Float64Array, error: Float64Array, sigmaPixels: number): Float64Array {
  const reach = Math.ceil(3 * sigmaPixels);
  const kernel = Float64Array.from({ length: 2 * reach + 1 }, (_, i) =>
    Math.exp(-0.5 * ((i - reach) / sigmaPixels) ** 2),
  );
  const weight = error.map((sigma, i) =>
    sigma > 0 && sigma < Infinity && Number.isFinite(flux[i]) ? 1 / (sigma * sigma) : 0,
  );
  return flux.map((value, i) => {
    if (weight[i] === 0) return value;
    let [sum, total] = [0, 0];
    for (let k = Math.max(0, i - reach); k <= Math.min(flux.length - 1, i + reach); k++) {
      if (weight[k] === 0) continue;
      const share = kernel[k - i + reach] * weight[k];
      sum += share * flux[k];
      total += share;
    }
    return sum / total;
  });
}

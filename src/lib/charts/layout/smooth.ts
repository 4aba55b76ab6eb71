/**
 * Inverse-variance weighted Gaussian smoothing: sum(g w f) / sum(g w) over neighbours up to three sigma, with the
 * standard deviation of that mean for independent pixels, sqrt(sum(g^2 w)) / sum(g w).
 * Unusable pixels (error not positive or not finite) lend nothing and stay as they are.
 * @param sigmaPixels width of the Gaussian in pixels
 */
export function smoothInverseVariance(
  flux: Float64Array,
  error: Float64Array,
  sigmaPixels: number,
): { flux: Float64Array; error: Float64Array } {
  const reach = Math.ceil(3 * sigmaPixels);
  const kernel = Float64Array.from({ length: 2 * reach + 1 }, (_, i) =>
    Math.exp(-0.5 * ((i - reach) / sigmaPixels) ** 2),
  );
  const weight = error.map((sigma, i) =>
    sigma > 0 && sigma < Infinity && Number.isFinite(flux[i]) ? 1 / (sigma * sigma) : 0,
  );
  const [smoothed, errors] = [Float64Array.from(flux), Float64Array.from(error)];
  for (let i = 0; i < flux.length; i++) {
    if (weight[i] === 0) continue;
    let [sum, total, squares] = [0, 0, 0];
    for (let k = Math.max(0, i - reach); k <= Math.min(flux.length - 1, i + reach); k++) {
      if (weight[k] === 0) continue;
      const g = kernel[k - i + reach];
      sum += g * weight[k] * flux[k];
      total += g * weight[k];
      squares += g * g * weight[k];
    }
    smoothed[i] = sum / total;
    errors[i] = Math.sqrt(squares) / total;
  }
  return { flux: smoothed, error: errors };
}

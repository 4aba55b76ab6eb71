/**
 * Complementary error function by the Chebyshev fit of Press et al. (Numerical Recipes, 2nd ed. 1992, section 6.2), relative error
 * below 1.2e-7 everywhere.
 */
export function complementaryError(x: number): number {
  const z = Math.abs(x);
  const t = 1 / (1 + 0.5 * z);
  const inner = 1.48851587 + t * (-0.82215223 + t * 0.17087277);
  const poly =
    1.00002368 +
    t * (0.37409196 + t * (0.09678418 + t * (-0.18628806 + t * (0.27886807 + t * (-1.13520398 + t * inner)))));
  const value = t * Math.exp(-z * z - 1.26551223 + t * poly);
  return x >= 0 ? value : 2 - value;
}

/** Share of a normal distribution below x standard deviations. */
export function normalCumulative(x: number): number {
  return 0.5 * complementaryError(-x * Math.SQRT1_2);
}

/** Density of the standard normal distribution. */
export function normalDensity(x: number): number {
  return 0.3989422804014327 * Math.exp(-0.5 * x * x);
}

const INVERSE_SQRT_TWO = Math.SQRT1_2;
const INVERSE_SQRT_TWO_PI = 0.3989422804014327;

/**
 * Complementary error function, rational Chebyshev fit, fractional error below 1.2e-7 everywhere.
 * Source: Press et al., Numerical Recipes (1992), section 6.2, `erfcc`.
 */
export function erfc(x: number): number {
  const z = Math.abs(x);
  const t = 1 / (1 + 0.5 * z);
  const polynomial =
    -1.26551223 +
    t *
      (1.00002368 +
        t *
          (0.37409196 +
            t *
              (0.09678418 +
                t *
                  (-0.18628806 +
                    t * (0.27886807 + t * (-1.13520398 + t * (1.48851587 + t * (-0.82215223 + t * 0.17087277))))))));
  const value = t * Math.exp(-z * z + polynomial);
  return x >= 0 ? value : 2 - value;
}

/** Cumulative standard normal distribution at t. */
export function normalCumulative(t: number): number {
  return 0.5 * erfc(-t * INVERSE_SQRT_TWO);
}

/** Standard normal density at t. */
export function normalDensity(t: number): number {
  return INVERSE_SQRT_TWO_PI * Math.exp(-0.5 * t * t);
}

import { expectedCalibrationError } from './reliability';

/** One answer before calibration, and whether it was within 1,000 km/s of the truth. */
export interface CalibrationSample {
  /** Terms of the map, the first of them the raw log odds. */
  terms: readonly number[];
  cameTrue: boolean;
}

/** Log odds = coefficients[0] + sum of coefficients[k + 1] times term k. */
export interface CalibrationFit {
  coefficients: number[];
  /** Mean log loss and expected calibration error on the folds left out. */
  logLoss: number;
  calibrationError: number;
}

const RIDGE = 1e-6;

function probabilityOf(coefficients: readonly number[], terms: readonly number[]): number {
  let logOdds = coefficients[0];
  for (let k = 0; k < terms.length; k++) logOdds += coefficients[k + 1] * terms[k];
  return 1 / (1 + Math.exp(-logOdds));
}

function solve(matrix: number[][], right: number[]): number[] {
  const a = matrix.map((row, i) => [...row, right[i]]);
  const n = right.length;
  for (let c = 0; c < n; c++) {
    for (let r = c + 1; r < n; r++) {
      const factor = a[r][c] / a[c][c];
      for (let k = c; k <= n; k++) a[r][k] -= factor * a[c][k];
    }
  }
  const x = new Array<number>(n).fill(0);
  for (let r = n - 1; r >= 0; r--) {
    let sum = a[r][n];
    for (let k = r + 1; k < n; k++) sum -= a[r][k] * x[k];
    x[r] = sum / a[r][r];
  }
  return x;
}

/**
 * Logistic regression by Newton's method: the map of raw log odds (and further terms) to probability that maximises the likelihood of
 * what came true.
 *
 * @returns offset, then one coefficient a term; of all samples alike, the offset runs to a large but finite value
 *
 * Source: Platt (1999, in Advances in Large Margin Classifiers), with more than one term; Hastie, Tibshirani & Friedman (2009), eq. 4.26.
 */
export function logisticRegression(samples: readonly CalibrationSample[]): number[] {
  const size = (samples[0]?.terms.length ?? 0) + 1;
  let coefficients = new Array<number>(size).fill(0);
  for (let iteration = 0; iteration < 50; iteration++) {
    const gradient = coefficients.map((value) => -RIDGE * samples.length * value);
    const hessian = coefficients.map((_, i) =>
      coefficients.map((__, j) => (i === j ? RIDGE * samples.length + 1e-9 : 0)),
    );
    for (const { terms, cameTrue } of samples) {
      const p = probabilityOf(coefficients, terms);
      const row = [1, ...terms];
      for (let i = 0; i < size; i++) {
        gradient[i] += row[i] * ((cameTrue ? 1 : 0) - p);
        for (let j = 0; j < size; j++) hessian[i][j] += row[i] * row[j] * p * (1 - p);
      }
    }
    const step = solve(hessian, gradient);
    // a full Newton step can overshoot where nearly all is certain
    const length = Math.min(1, 4 / Math.hypot(...step));
    coefficients = coefficients.map((value, i) => value + length * step[i]);
    if (Math.hypot(...step) < 1e-8) break;
  }
  return coefficients;
}

/** Fits on all samples, and judges the form of the map by what each of five folds says of the one left out. */
export function fitCalibration(samples: readonly CalibrationSample[], folds = 5): CalibrationFit {
  const forecasts: { probability: number; cameTrue: boolean }[] = [];
  for (let fold = 0; fold < folds; fold++) {
    const coefficients = logisticRegression(samples.filter((_, i) => i % folds !== fold));
    samples.forEach(({ terms, cameTrue }, i) => {
      if (i % folds === fold) forecasts.push({ probability: probabilityOf(coefficients, terms), cameTrue });
    });
  }
  const bounded = (p: number) => Math.min(1 - 1e-12, Math.max(1e-12, p));
  const loss = forecasts.reduce((sum, f) => sum - Math.log(bounded(f.cameTrue ? f.probability : 1 - f.probability)), 0);
  return {
    coefficients: logisticRegression(samples),
    logLoss: loss / forecasts.length,
    calibrationError: expectedCalibrationError(forecasts),
  };
}

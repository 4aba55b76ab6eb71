import { logOdds } from './calibrate';

/** One answer of known truth. */
export interface CalibrationRow {
  group: string;
  raw: number;
  /** Whether the first candidate lies within 1,000 km/s of the truth. */
  right: boolean;
}

/** A line on log odds. */
export interface CalibrationLine {
  offset: number;
  slope: number;
  count: number;
}

/** Prior of the line: log odds times 0.3, which never makes a thin group secure, with the weight of a few dozen answers, so that thin groups stay sensible. */
const PRIOR = { offset: 0, slope: 0.3, offsetSigma: 1.5, slopeSigma: 0.15 } as const;
const LEAST_SLOPE = 0.02;

/**
 * Logistic regression of "right" on the log odds of the raw posterior, by Newton steps on the penalised likelihood; the
 * slope is kept positive, so that the map is monotone.
 *
 * @returns the prior's line where there is no row
 * Source: Platt (1999), "Probabilistic outputs for support vector machines"; the penalty is a Gaussian prior.
 */
export function fitCalibration(rows: readonly CalibrationRow[]): CalibrationLine {
  let offset: number = PRIOR.offset;
  let slope: number = PRIOR.slope;
  for (let round = 0; round < 50; round++) {
    let g0 = -(offset - PRIOR.offset) / PRIOR.offsetSigma ** 2;
    let g1 = -(slope - PRIOR.slope) / PRIOR.slopeSigma ** 2;
    let h00 = 1 / PRIOR.offsetSigma ** 2;
    let h01 = 0;
    let h11 = 1 / PRIOR.slopeSigma ** 2;
    for (const row of rows) {
      const x = logOdds(row.raw);
      const p = 1 / (1 + Math.exp(-(offset + slope * x)));
      const error = (row.right ? 1 : 0) - p;
      const weight = Math.max(1e-9, p * (1 - p));
      g0 += error;
      g1 += error * x;
      h00 += weight;
      h01 += weight * x;
      h11 += weight * x * x;
    }
    const determinant = h00 * h11 - h01 * h01;
    let step0 = (h11 * g0 - h01 * g1) / determinant;
    let step1 = (h00 * g1 - h01 * g0) / determinant;
    const largest = Math.max(Math.abs(step0), 4 * Math.abs(step1));
    if (largest > 1) {
      step0 /= largest;
      step1 /= largest;
    }
    offset += step0;
    slope = Math.max(LEAST_SLOPE, slope + step1);
    if (largest < 1e-9) break;
  }
  return { offset, slope, count: rows.length };
}

/** Lines of every group and of all rows together. */
export function fitCalibrationMap(rows: readonly CalibrationRow[]): {
  any: CalibrationLine;
  groups: Record<string, CalibrationLine>;
} {
  const names = [...new Set(rows.map((row) => row.group))].sort();
  return {
    any: fitCalibration(rows),
    groups: Object.fromEntries(names.map((name) => [name, fitCalibration(rows.filter((row) => row.group === name))])),
  };
}

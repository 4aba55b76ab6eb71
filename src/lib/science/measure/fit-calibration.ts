import { logOdds, logSignal, type CalibrationLine } from './calibrate';
import { choleskyInPlace, choleskySolve } from './fit/solve';

/** One answer of known truth. */
export interface CalibrationRow {
  group: string;
  raw: number;
  /** Signal-to-noise ratio of what it rests on. */
  signal: number;
  /** Whether the first candidate lies within 1,000 km/s of the truth. */
  right: boolean;
}

/**
 * Gaussian prior of offset and slopes: log odds times 0.3, which never makes a thin group secure, rising with the
 * signal, with the weight of a few dozen answers, so that thin groups stay sensible.
 */
const PRIOR = { mean: [0, 0.3, 0.5], sigma: [1.5, 0.15, 0.5], least: [-Infinity, 0.02, 0] } as const;

/**
 * Logistic regression of "right" on the log odds of the raw posterior and the logarithm of the signal, by Newton steps
 * on the penalised likelihood; both slopes are kept from falling, so that the map is monotone.
 *
 * @returns the prior's line where there is no row
 * Source: Platt (1999), "Probabilistic outputs for support vector machines"; the penalty is a Gaussian prior.
 */
export function fitCalibration(rows: readonly CalibrationRow[]): CalibrationLine & { count: number } {
  const line: number[] = [...PRIOR.mean];
  const terms = rows.map((row) => [1, logOdds(row.raw), logSignal(row.signal)]);
  for (let round = 0; round < 60; round++) {
    const step = Float64Array.from(line, (value, k) => -(value - PRIOR.mean[k]) / PRIOR.sigma[k] ** 2);
    const hessian = new Float64Array(9);
    for (let k = 0; k < 3; k++) hessian[4 * k] = 1 / PRIOR.sigma[k] ** 2;
    rows.forEach((row, r) => {
      const term = terms[r];
      const p = 1 / (1 + Math.exp(-(line[0] + line[1] * term[1] + line[2] * term[2])));
      const weight = Math.max(1e-9, p * (1 - p));
      for (let a = 0; a < 3; a++) {
        step[a] += ((row.right ? 1 : 0) - p) * term[a];
        for (let b = 0; b < 3; b++) hessian[3 * a + b] += weight * term[a] * term[b];
      }
    });
    if (!choleskyInPlace(hessian, 3)) break;
    choleskySolve(hessian, step, 3);
    const largest = Math.max(...step.map(Math.abs));
    const scale = largest > 0.5 ? 0.5 / largest : 1;
    let moved = 0;
    for (let k = 0; k < 3; k++) {
      const next = Math.max(PRIOR.least[k], line[k] + scale * step[k]);
      moved = Math.max(moved, Math.abs(next - line[k]));
      line[k] = next;
    }
    if (moved < 1e-9) break;
  }
  return { offset: line[0], slope: line[1], signalSlope: line[2], count: rows.length };
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

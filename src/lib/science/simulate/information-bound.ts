import type { DetectorGrid } from './detector-grid';
import type { PixelProfile } from './line-on-pixels';

/** A line with its flux and the group whose members share one free flux (doublets that atomic physics ties). */
export interface BoundLine {
  profile: PixelProfile;
  flux: number;
  group: string;
}

/** Solves A x = b for symmetric positive definite A by Cholesky; null where A is singular. A is overwritten. */
function solveSymmetric(a: Float64Array[], b: Float64Array): Float64Array | null {
  const n = b.length;
  for (let j = 0; j < n; j++) {
    for (let i = j; i < n; i++) {
      let sum = a[i][j];
      for (let k = 0; k < j; k++) sum -= a[i][k] * a[j][k];
      if (i === j) {
        if (!(sum > 1e-12)) return null;
        a[j][j] = Math.sqrt(sum);
      } else a[i][j] = sum / a[j][j];
    }
  }
  const x = Float64Array.from(b);
  for (let i = 0; i < n; i++) {
    for (let k = 0; k < i; k++) x[i] -= a[i][k] * x[k];
    x[i] /= a[i][i];
  }
  for (let i = n - 1; i >= 0; i--) {
    for (let k = i + 1; k < n; k++) x[i] -= a[k][i] * x[k];
    x[i] /= a[i][i];
  }
  return x;
}

/**
 * Smallest standard error of ln(1 + z) that any unbiased estimate from these lines can have, with every group's flux, one common
 * intrinsic width and a straight continuum under each run of lines free: the Cramér-Rao bound from the Fisher matrix of independent
 * normal pixels.
 *
 * @param lines narrow lines of one object, sorted by wavelength
 * @param variance of each pixel's flux density; Infinity drops the pixel
 * @returns NaN where the lines carry no information
 *
 * Source: Cramér (1946), Rao (1945); for one finely sampled line of known width it is sqrt(2) sigma / S.
 */
export function redshiftInformationBound(
  lines: readonly BoundLine[],
  grid: DetectorGrid,
  variance: Float64Array,
): number {
  const used = lines.filter(({ profile, flux }) => flux > 0 && profile.coverage > 0.01);
  if (used.length === 0) return NaN;
  const groups = [...new Set(used.map((line) => line.group))];
  // runs of lines whose pixels touch share one continuum
  const runs: { from: number; to: number }[] = [];
  for (const { profile } of used) {
    const margin = Math.round(profile.value.length * 0.75);
    const from = Math.max(0, profile.first - margin);
    const to = Math.min(variance.length, profile.first + profile.value.length + margin);
    const last = runs[runs.length - 1];
    if (last && from < last.to) last.to = Math.max(last.to, to);
    else runs.push({ from, to });
  }
  const size = 2 + groups.length + 2 * runs.length;
  const fisher = Array.from({ length: size }, () => new Float64Array(size));
  const row = new Float64Array(size);
  runs.forEach(({ from, to }, run) => {
    const middle = 0.5 * (grid.centre[from] + grid.centre[to - 1]);
    const half = 0.5 * (grid.centre[to - 1] - grid.centre[from]) || 1;
    for (let i = from; i < to; i++) {
      if (!(variance[i] > 0) || variance[i] === Infinity) continue;
      row.fill(0);
      for (const { profile, flux, group } of used) {
        const k = i - profile.first;
        if (k < 0 || k >= profile.value.length) continue;
        row[0] += flux * profile.byShift[k];
        row[1] += flux * profile.byWidth[k];
        row[2 + groups.indexOf(group)] += flux * profile.value[k];
      }
      row[2 + groups.length + 2 * run] = 1;
      row[3 + groups.length + 2 * run] = (grid.centre[i] - middle) / half;
      const weight = 1 / variance[i];
      for (let p = 0; p < size; p++) {
        if (row[p] === 0) continue;
        for (let q = 0; q <= p; q++) fisher[p][q] += weight * row[p] * row[q];
      }
    }
  });
  // unit diagonal keeps the factorisation well conditioned
  const scale = fisher.map((r, p) => (r[p] > 0 ? 1 / Math.sqrt(r[p]) : 1));
  for (let p = 0; p < size; p++) for (let q = 0; q <= p; q++) fisher[p][q] *= scale[p] * scale[q];
  const unit = new Float64Array(size);
  unit[0] = 1;
  const column = solveSymmetric(fisher, unit);
  return column ? Math.sqrt(column[0]) * scale[0] : NaN;
}

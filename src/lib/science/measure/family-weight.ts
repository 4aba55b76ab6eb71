import { continuumFault } from './continuum-fault';
import { familyEvidence, openReference, type FluxLikelihood } from './evidence';
import { RATIO_PRIORS } from './fit/components';
import { WIDEST_NARROW_KMS } from './suspect';
import { invertPositiveDefinite } from './fit/solve';
import type { WeighContext } from './weigh-context';
import type { JointFit } from './fit/joint-fit';
import { LINE_FAMILIES, type LineFamily } from './line-families';
import { LYMAN_PROFILE_COMPONENTS } from './lyman-alpha';

const NARROW_NUCLEUS = LINE_FAMILIES.find((family) => family.name === 'narrow-line active nucleus')!;

/** Log evidence that broad lines must bring for a quasar to be considered. */
const LEAST_BROAD_EVIDENCE = 6;

/** Rows to sum into one flux: shares of the components that make up one line. */
interface Row {
  members: { index: number; share: number }[];
  /** Variance of the flux from faults of the continuum. */
  fault: number;
  logRatio: number;
  scatter: number;
  /** Log prior of a doublet's fitted ratio. */
  logPrior: number;
}

/**
 * Log evidence of a family for a joint fit, against no lines.
 *
 * The asymmetric Lyman-alpha profile counts as one flux with the fitted shape. A quasar's narrow lines are weighed by
 * the narrow-line nucleus' ratios after its broad lines, and count only where they speak for it.
 *
 * @param scale what errors are multiplied by
 * @returns the evidence, and the part of it that broad lines bring
 */
export function evidenceOfFamily(
  fit: JointFit,
  family: LineFamily,
  context: WeighContext,
  scale: number = context.noiseFactor,
): { logEvidence: number; broad: number } {
  if (family.kind !== 'broad') {
    const profile = family.kind === 'lyman' ? LYMAN_PROFILE_COMPONENTS : 0;
    return { logEvidence: evidenceOfRows(fit, rowsOf(fit, family, 0, profile, context), [], context, scale), broad: 0 };
  }
  const narrow: number[] = [];
  const broad: number[] = [];
  fit.components.forEach((component, i) => {
    if (fit.amplitude[i] > 0) (component.width === 0 ? narrow : broad).push(i);
  });
  const wide = evidenceOfRows(fit, rowsOf(fit, family, 1, 0, context), narrow, context, scale);
  // At the limit of their width narrow lines are cores of the broad ones.
  const slim =
    fit.sigmaKms[0] < WIDEST_NARROW_KMS
      ? evidenceOfRows(fit, rowsOf(fit, NARROW_NUCLEUS, 0, 0, context), broad, context, scale)
      : 0;
  // Without broad lines that stand on their own the narrow hypothesis says all there is to say.
  return { logEvidence: wide > LEAST_BROAD_EVIDENCE ? wide + Math.max(0, slim) : -Infinity, broad: wide };
}

function rowsOf(fit: JointFit, family: LineFamily, width: 0 | 1, profile: number, context: WeighContext): Row[] {
  const n = fit.components.length;
  const rows: Row[] = [];
  const taken = new Set<number>();
  let profileFlux = 0;
  for (let k = 0; k < profile; k++) profileFlux += fit.amplitude[k];
  fit.components.forEach((component, i) => {
    const line = family.lines[component.name];
    if (!line || taken.has(i) || component.width !== width || !(fit.gram[i * n + i] > 0)) return;
    const pair = width === 0 ? doubletOf(fit, i) : null;
    let members = [{ index: i, share: 1 }];
    let ratio = line[0];
    let logPrior = 0;
    if (i === 0 && profileFlux > 0) {
      members = Array.from({ length: profile }, (_, k) => ({ index: k, share: fit.amplitude[k] / profileFlux }));
    } else if (pair && family.lines[fit.components[pair.other].name]) {
      taken.add(pair.other);
      members = [
        { index: i, share: pair.share },
        { index: pair.other, share: 1 - pair.share },
      ];
      ratio += family.lines[fit.components[pair.other].name][0];
      logPrior = pair.logPrior;
    }
    const continuum = width === 1 ? context.stiffContinuum : context.continuum;
    const fault = continuumFault(context.data, continuum, fit, component.members[0].rest, width);
    rows.push({ members, fault, logRatio: Math.log(ratio), scatter: line[1], logPrior });
  });
  return rows;
}

/**
 * The doublet that a component belongs to: its partner, the component's share of the sum, bounded by atomic physics, and
 * the log prior of the fitted ratio. Null where it has no covered partner.
 */
function doubletOf(fit: JointFit, i: number): { other: number; share: number; logPrior: number } | null {
  const n = fit.components.length;
  const name = fit.components[i].name;
  const prior = RATIO_PRIORS.find((p) => p.numerator === name || p.denominator === name);
  if (!prior) return null;
  const partner = prior.numerator === name ? prior.denominator : prior.numerator;
  const other = fit.components.findIndex((c) => c.name === partner && c.width === 0);
  if (other < 0 || !(fit.gram[other * n + other] > 0)) return null;
  const top = prior.numerator === name ? fit.amplitude[i] : fit.amplitude[other];
  const bottom = prior.numerator === name ? fit.amplitude[other] : fit.amplitude[i];
  const fitted = bottom > 0 ? top / bottom : top > 0 ? Infinity : prior.mean;
  const ratio = Math.min(prior.high, Math.max(prior.low, fitted));
  const deviation = (ratio - prior.mean) / prior.sigma;
  const share = prior.numerator === name ? ratio / (1 + ratio) : 1 / (1 + ratio);
  return { other, share, logPrior: -0.5 * deviation * deviation };
}

function evidenceOfRows(fit: JointFit, rows: Row[], held: number[], context: WeighContext, scale: number): number {
  const n = fit.components.length;
  const m = rows.length;
  if (m === 0) return -Infinity;
  const inverse = 1 / (scale * scale);
  const gram = new Float64Array(m * m);
  const right = new Float64Array(m);
  rows.forEach((row, a) => {
    for (const { index, share } of row.members) {
      let value = fit.right[index];
      for (const h of held) value -= fit.gram[index * n + h] * fit.amplitude[h];
      right[a] += share * value * inverse;
    }
    rows.forEach((other, b) => {
      let sum = 0;
      for (const p of row.members) {
        for (const q of other.members) sum += p.share * q.share * fit.gram[p.index * n + q.index];
      }
      gram[a * m + b] = sum * inverse;
    });
    gram[a * m + a] *= 1 + 1e-9;
  });
  const likelihood = withFaults(gram, right, rows);
  const logPrior = rows.reduce((sum, row) => sum + row.logPrior, 0);
  const evidence = familyEvidence(
    likelihood,
    {
      logRatio: Float64Array.from(rows, (row) => row.logRatio),
      scatter: Float64Array.from(rows, (row) => row.scatter),
    },
    openReference(context.logNoiseFlux),
  ).logEvidence;
  return evidence + logPrior;
}

/** Adds the fault variances to the covariance of the fluxes and turns the likelihood back into normal equations. */
function withFaults(gram: Float64Array, right: Float64Array, rows: Row[]): FluxLikelihood {
  const m = rows.length;
  const covariance = invertPositiveDefinite(gram, m);
  if (!covariance) return { count: m, gram, right };
  const flux = new Float64Array(m);
  for (let a = 0; a < m; a++) for (let b = 0; b < m; b++) flux[a] += covariance[a * m + b] * right[b];
  for (let a = 0; a < m; a++) covariance[a * m + a] += rows[a].fault;
  const blurred = invertPositiveDefinite(covariance, m);
  if (!blurred) return { count: m, gram, right };
  const blurredRight = new Float64Array(m);
  for (let a = 0; a < m; a++) for (let b = 0; b < m; b++) blurredRight[a] += blurred[a * m + b] * flux[b];
  return { count: m, gram: blurred, right: blurredRight };
}

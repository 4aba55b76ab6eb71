import { SPEED_OF_LIGHT_KMS } from '../constants/physical';
import { familyEvidence, type FluxLikelihood } from './evidence';
import { invertPositiveDefinite } from './fit/solve';
import { pixelOf } from './fit/line-profile';
import type { WeighContext } from './weigh-context';
import type { JointFit } from './fit/joint-fit';
import { LINE_FAMILIES, type LineFamily } from './line-families';
import { LYMAN_PROFILE_COMPONENTS } from './lyman-alpha';

const NARROW_NUCLEUS = LINE_FAMILIES.find((family) => family.name === 'narrow-line active nucleus')!;

/**
 * Continua are not known better than this share of their level over the width of a line: it bounds how much a weak
 * bump on a bright continuum may say. Narrow and broad lines; common practice, no single source.
 */
export const CONTINUUM_FAULT = [0.01, 0.03] as const;

/** Log evidence that broad lines must bring for a quasar to be considered. */
const LEAST_BROAD_EVIDENCE = 6;

/** Rows to sum into one flux: shares of the components that make up one line. */
interface Row {
  members: { index: number; share: number }[];
  /** Variance of the flux from faults of the continuum. */
  fault: number;
  logRatio: number;
  scatter: number;
}

/**
 * Log evidence of a family for a joint fit, against no lines.
 *
 * The asymmetric Lyman-alpha profile counts as one flux with the fitted shape. A quasar's narrow lines are weighed by
 * the narrow-line nucleus' ratios after its broad lines, and count only where they speak for it.
 *
 * @param scale what errors are multiplied by
 *
 */
export function evidenceOfFamily(
  fit: JointFit,
  family: LineFamily,
  context: WeighContext,
  scale: number = context.noiseFactor,
): number {
  if (family.kind !== 'broad') {
    const profile = family.kind === 'lyman' ? LYMAN_PROFILE_COMPONENTS : 0;
    return evidenceOfRows(fit, rowsOf(fit, family, 0, profile, context), [], context, scale);
  }
  const narrow: number[] = [];
  const broad: number[] = [];
  fit.components.forEach((component, i) => {
    if (fit.amplitude[i] > 0) (component.width === 0 ? narrow : broad).push(i);
  });
  const wide = evidenceOfRows(fit, rowsOf(fit, family, 1, 0, context), narrow, context, scale);
  const slim = evidenceOfRows(fit, rowsOf(fit, NARROW_NUCLEUS, 0, 0, context), broad, context, scale);
  // Without broad lines that stand on their own the narrow hypothesis says all there is to say.
  return wide > LEAST_BROAD_EVIDENCE ? wide + Math.max(0, slim) : -Infinity;
}

function rowsOf(fit: JointFit, family: LineFamily, width: 0 | 1, profile: number, context: WeighContext): Row[] {
  const n = fit.components.length;
  const rows: Row[] = [];
  let profileFlux = 0;
  for (let k = 0; k < profile; k++) profileFlux += fit.amplitude[k];
  fit.components.forEach((component, i) => {
    const line = family.lines[component.name];
    if (!line || component.width !== width || !(fit.gram[i * n + i] > 0)) return;
    const members =
      i === 0 && profileFlux > 0
        ? Array.from({ length: profile }, (_, k) => ({ index: k, share: fit.amplitude[k] / profileFlux }))
        : [{ index: i, share: 1 }];
    const centre = component.members[0].rest * Math.exp(fit.logScale);
    const pixel = pixelOf(context.data.edges, centre);
    const sigma = Math.hypot(context.data.lsfSigma[pixel], (centre * fit.sigmaKms[width]) / SPEED_OF_LIGHT_KMS);
    const level = Math.abs((width === 1 ? context.stiffContinuum : context.continuum)[pixel]);
    const fault = (CONTINUUM_FAULT[width] * level * 2.3548 * sigma) ** 2;
    rows.push({ members, fault, logRatio: Math.log(line[0]), scatter: line[1] });
  });
  return rows;
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
  return familyEvidence(
    likelihood,
    {
      logRatio: Float64Array.from(rows, (row) => row.logRatio),
      scatter: Float64Array.from(rows, (row) => row.scatter),
    },
    context.logNoiseFlux,
  ).logEvidence;
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

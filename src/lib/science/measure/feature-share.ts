import { SPEED_OF_LIGHT_KMS } from '../constants/physical';
import { continuumFault } from './continuum-fault';
import type { ComponentMember } from './fit/components';
import { addLineProfile, pixelOf, PROFILE_REACH } from './fit/line-profile';
import type { JointFit } from './fit/joint-fit';
import type { WeighContext } from './weigh-context';

/** Lines farther from a feature than this, in widths, are none of its making. */
const REACH = 2.5;

/** What of one component lies on one feature. */
interface Share {
  component: number;
  flux: number;
}

/** What fitted lines bring on every feature, before errors are scaled; 0 where no line lies. */
export interface FeatureShares {
  /** Significance, faults of the continuum counted as noise. */
  significance: Float64Array;
  /** Log likelihood, without such faults. */
  gain: Float64Array;
}

/** What the fitted lines bring on every feature. Each belongs to the nearest within 2.5 widths, so that none counts twice. */
export function sharesOfFeatures(context: WeighContext, fit: JointFit): FeatureShares {
  const { features } = context;
  const stretch = Math.exp(fit.logScale);
  const shares: Share[][] = features.map(() => []);
  const faults = new Float64Array(features.length);
  fit.components.forEach((component, i) => {
    if (!(fit.amplitude[i] > 0) || component.auxiliary) return;
    let squares = 0;
    const inside = new Map<number, number>();
    for (const member of component.members) {
      const j = nearestFeature(context, Math.log(member.rest * stretch), fit.sigmaKms[component.width]);
      if (j < 0) continue;
      const alone = component.members.length === 1;
      const part = alone ? 1 : informationOf(context, member, stretch, fit.sigmaKms[component.width]);
      // A tied line that makes no feature brought nothing: what its component gained lies on the others.
      squares += part;
      inside.set(j, (inside.get(j) ?? 0) + part);
    }
    if (!(squares > 0)) return;
    for (const [j, square] of inside) {
      shares[j].push({ component: i, flux: fit.amplitude[i] * Math.sqrt(square / squares) });
      const continuum = component.width === 1 ? context.stiffContinuum : context.continuum;
      const rest = component.members[0].rest;
      faults[j] = Math.max(faults[j], continuumFault(context.data, continuum, fit, rest, component.width));
    }
  });
  const gain = new Float64Array(features.length);
  const significance = new Float64Array(features.length);
  shares.forEach((share, j) => {
    const { flux, total } = combined(fit, share);
    if (!(total > 0)) return;
    gain[j] = 0.5 * total;
    significance[j] = flux / Math.sqrt(flux ** 2 / total + faults[j]);
  });
  return { significance, gain };
}

/** Pixels a profile is written on. */
let profile = new Float64Array(256);

/** Information that one of several tied lines brings to their common flux: the weighted square of its profile. */
function informationOf(context: WeighContext, member: ComponentMember, stretch: number, sigmaKms: number): number {
  const { data } = context;
  const centre = member.rest * stretch;
  if (centre < data.edges[0] || centre > data.edges[data.count]) return 0;
  const pixel = pixelOf(data.edges, centre);
  const sigma = Math.hypot(data.lsfSigma[pixel], (centre * sigmaKms) / SPEED_OF_LIGHT_KMS);
  const from = pixelOf(data.edges, centre - PROFILE_REACH * sigma);
  const length = pixelOf(data.edges, centre + PROFILE_REACH * sigma) + 1 - from;
  if (profile.length < length) profile = new Float64Array(2 * length);
  profile.fill(0, 0, length);
  addLineProfile(data, centre, sigmaKms, member.share, from, length, profile, null, null);
  let sum = 0;
  for (let i = 0; i < length; i++) sum += data.weight[from + i] * profile[i] * profile[i];
  return sum;
}

function nearestFeature(context: WeighContext, logWavelength: number, sigmaKms: number): number {
  let nearest = -1;
  let best = REACH;
  context.features.forEach((feature, j) => {
    const width = Math.hypot(sigmaKms, feature.sigmaKms, 60) / SPEED_OF_LIGHT_KMS;
    const apart = Math.abs(feature.logWavelength - logWavelength);
    if (apart < REACH * width && apart < best) {
      best = apart;
      nearest = j;
    }
  });
  return nearest;
}

function combined(fit: JointFit, share: readonly Share[]): { flux: number; total: number } {
  const n = fit.components.length;
  let total = 0;
  let flux = 0;
  for (const a of share) {
    flux += a.flux;
    for (const b of share) total += a.flux * fit.gram[a.component * n + b.component] * b.flux;
  }
  return { flux, total };
}

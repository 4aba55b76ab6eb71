import { SPEED_OF_LIGHT_KMS } from '../constants/physical';
import type { FinalFit } from './final-fit';

/**
 * Velocities of quasar lines about the systemic redshift, km/s: mean and intrinsic scatter; the narrow lines first.
 * C IV's mean depends on luminosity and stands for a typical one; the narrow lines define the systemic redshift here.
 * Source: Shen et al. (2016, ApJ 831, 7), from memory; Lyman-alpha and Si IV taken like C IV.
 */
const QUASAR_VELOCITIES: readonly (readonly [string, 0 | 1, number, number])[] = [
  ['[O II] 3727', 0, 0, 46],
  ['[O II] 3730', 0, 0, 46],
  ['[O III] 5008', 0, 0, 56],
  ['Mg II 2796', 1, -57, 205],
  ['C III] 1909', 1, -229, 233],
  ['H-beta 4863', 1, -109, 400],
  ['H-alpha 6565', 1, -109, 400],
  ['C IV 1548', 1, -300, 415],
  ['Si IV 1394', 1, -200, 415],
  ['Lyman-alpha 1216', 1, 0, 500],
];

/**
 * The same of a narrow-line active nucleus, whose [O III] winds carry blue: scatter alone, km/s, other lines 15.
 * Common practice; the quasars' [O III] scatter of 56 km/s (Shen et al. 2016) bounds it from above.
 */
const WIND_SCATTER_KMS: Readonly<Record<string, number>> = {
  '[O III] 5008': 45,
  '[Ne V] 3427': 60,
  '[Ne III] 3870': 30,
};
const CALM_SCATTER_KMS = 15;

/** Redshift and errors of the redshift itself, not of ln(1+z). */
export interface RedshiftWithErrors {
  redshift: number;
  /** The measurement's own. */
  measured: number;
  /** With the intrinsic scatter of broad-line quasars. */
  total: number;
}

/** Significance from which on a quasar's narrow line fixes its redshift. */
const NARROW_SIGNIFICANCE = 5;
/** Scatter of what the whole spectrum says about the systemic redshift, km/s: measured on simulated quasars. */
const WHOLE_SCATTER_KMS = 450;

/**
 * The reported redshift. For narrow lines it is the joint fit's, unless an active nucleus' winds pull them apart. A
 * broad-line quasar's lines disagree by more than their errors: each line's own shift is corrected by its mean velocity
 * and weighted by measurement and intrinsic scatter together, so that a strong C IV does not outvote Mg II or [O III].
 * Without a narrow line the whole spectrum has its say too, since blends and the forest's bite out of Lyman-alpha move
 * single lines; a part of the distance between the two counts as error.
 */
export function redshiftWithErrors(final: FinalFit, broad: boolean): RedshiftWithErrors {
  const own = Math.min(1, final.errors.logScale * final.errorScale);
  const plain = Math.exp(final.logScale);
  if (!final.shifts) return { redshift: plain - 1, measured: own * plain, total: own * plain };
  let weight = 0;
  let sum = 0;
  let anchored = false;
  for (const { component, shift, information } of final.shifts) {
    const line = final.fit.components[component];
    const known = broad
      ? QUASAR_VELOCITIES.find(([name, width]) => name === line.name && width === line.width)
      : ([line.name, line.width, 0, WIND_SCATTER_KMS[line.name] ?? CALM_SCATTER_KMS] as const);
    const significance = final.fit.amplitude[component] / (final.errors.amplitude[component] * final.errorScale);
    if (!known || !(information > 0) || !(significance > 4)) continue;
    if (line.width === 0 && !line.name.startsWith('Lyman') && significance > NARROW_SIGNIFICANCE) anchored = true;
    const scatter = known[3] / SPEED_OF_LIGHT_KMS;
    const limit = (line.width === 1 ? 3000 : 600) / SPEED_OF_LIGHT_KMS;
    const bounded = Math.max(-limit, Math.min(limit, shift));
    const w = 1 / (final.errorScale ** 2 / information + scatter * scatter);
    weight += w;
    sum += w * (bounded - known[2] / SPEED_OF_LIGHT_KMS);
  }
  if (!(weight > 0))
    return {
      redshift: plain - 1,
      measured: own * plain,
      total: Math.hypot(own, (broad ? 400 : CALM_SCATTER_KMS) / SPEED_OF_LIGHT_KMS) * plain,
    };
  const total = Math.sqrt(1 / weight);
  if (final.wholeLogScale !== null && !anchored) {
    const lines = final.logScale + sum / weight;
    const whole = 1 / (WHOLE_SCATTER_KMS / SPEED_OF_LIGHT_KMS) ** 2;
    const stretch = Math.exp((weight * lines + whole * final.wholeLogScale) / (weight + whole));
    const apart = lines - final.wholeLogScale;
    return {
      redshift: stretch - 1,
      measured: own * stretch,
      total: Math.hypot(Math.max(own, total), 0.3 * apart) * stretch,
    };
  }
  const stretch = Math.exp(final.logScale + sum / weight);
  return { redshift: stretch - 1, measured: own * stretch, total: Math.max(own, total) * stretch };
}

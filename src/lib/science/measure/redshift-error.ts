import { SPEED_OF_LIGHT_KMS } from '../constants/physical';
import type { FinalFit } from './final-fit';

/**
 * Intrinsic scatter of broad and narrow lines about the systemic redshift of quasars, km/s, after mean shifts.
 * Source: Shen et al. (2016, ApJ 831, 7), from memory.
 */
const INTRINSIC_KMS: readonly (readonly [string, 0 | 1, number])[] = [
  ['[O II] 3730', 0, 46],
  ['[O II] 3727', 0, 46],
  ['[O III] 5008', 0, 56],
  ['Mg II 2796', 1, 205],
  ['C III] 1909', 1, 233],
  ['H-beta 4863', 1, 400],
  ['H-alpha 6565', 1, 400],
  ['C IV 1548', 1, 415],
  ['Lyman-alpha 1216', 1, 415],
  ['Si IV 1394', 1, 415],
];

/** Errors of the redshift itself, not of ln(1+z). */
export interface RedshiftErrors {
  /** The measurement's own. */
  measured: number;
  /** With the intrinsic floor of broad-line quasars. */
  total: number;
}

/**
 * Error of the redshift: the fit's own, scaled by the noise, and for broad-line quasars the intrinsic scatter of their
 * lines (weighted by what each line says) added in quadrature.
 */
export function redshiftErrors(final: FinalFit, broad: boolean): RedshiftErrors {
  const stretch = Math.exp(final.logScale);
  const own = Math.min(1, final.errors.logScale * final.errorScale);
  const measured = own * stretch;
  if (!broad) return { measured, total: measured };
  let information = 0;
  let weighted = 0;
  final.fit.components.forEach((component, i) => {
    const entry = INTRINSIC_KMS.find(([name, width]) => name === component.name && width === component.width);
    if (!entry) return;
    const significance = final.fit.amplitude[i] / final.errors.amplitude[i];
    if (!(significance > 3)) return;
    const sharpness = (significance / final.fit.sigmaKms[component.width]) ** 2;
    information += sharpness;
    weighted += sharpness * entry[2] ** 2;
  });
  const floor = information > 0 ? Math.sqrt(weighted / information) : 400;
  return { measured, total: Math.hypot(measured, (floor / SPEED_OF_LIGHT_KMS) * stretch) };
}

import { lineByName } from '../constants/lines';
import { SPEED_OF_LIGHT_KMS } from '../constants/physical';
import { componentOf, type LineComponent } from './fit/components';
import type { FitData } from './fit/fit-windows';
import { pixelOf } from './fit/line-profile';
import type { JointFit } from './fit/joint-fit';
import { lowerBound } from './noise';

const LYMAN_ALPHA = lineByName('Lyman-alpha 1216');

/** Velocity offsets of the red wing's components, km/s: an asymmetric profile as a sum of positive Gaussians. */
const WING_OFFSETS_KMS = [150, 350, 700] as const;

const wing = (offsetKms: number, index: number): LineComponent => ({
  name: `Lyman-alpha red wing ${index + 1}`,
  width: 0,
  members: [
    { entry: LYMAN_ALPHA, rest: LYMAN_ALPHA.wavelengthVacuum * (1 + offsetKms / SPEED_OF_LIGHT_KMS), share: 1 },
  ],
});

/** Components of a Lyman-alpha emitter: the line with a red wing, and the ultraviolet lines that may come with it. */
export const LYMAN_COMPONENTS: readonly LineComponent[] = [
  componentOf('Lyman-alpha 1216'),
  ...WING_OFFSETS_KMS.map(wing),
  ...[
    'C IV 1548',
    'C IV 1551',
    'He II 1640',
    '[C III] 1907',
    'C III] 1909',
    'Mg II 2796',
    'Mg II 2804',
    '[O II] 3727',
    '[O II] 3730',
  ].map((name) => componentOf(name)),
];

/** Number of leading components of `LYMAN_COMPONENTS` that make up the Lyman-alpha profile. */
export const LYMAN_PROFILE_COMPONENTS = 1 + WING_OFFSETS_KMS.length;

/**
 * Redshift of the peak of the fitted Lyman-alpha profile as the instrument sees it, and the profile's width and skew.
 *
 * @param fit a fit with `LYMAN_COMPONENTS`
 * @returns ln(1+z) of the peak, FWHM deconvolved by the line-spread function (km/s), and the share of flux in the wing
 */
export function lymanAlphaPeak(data: FitData, fit: JointFit): { logScale: number; fwhmKms: number; wingShare: number } {
  const pixel = pixelOf(data.edges, LYMAN_ALPHA.wavelengthVacuum * Math.exp(fit.logScale));
  const lsfKms = (data.lsfSigma[pixel] / data.wavelength[pixel]) * SPEED_OF_LIGHT_KMS;
  const sigma = Math.hypot(lsfKms, fit.sigmaKms[0]);
  const offsets = [0, ...WING_OFFSETS_KMS];
  let total = 0;
  for (let k = 0; k < offsets.length; k++) total += fit.amplitude[k];
  if (!(total > 0)) return { logScale: fit.logScale, fwhmKms: 2.3548 * fit.sigmaKms[0], wingShare: 0 };
  const height = (velocity: number) => {
    let sum = 0;
    for (let k = 0; k < offsets.length; k++) {
      const t = (velocity - offsets[k]) / sigma;
      sum += fit.amplitude[k] * Math.exp(-0.5 * t * t);
    }
    return sum;
  };
  const step = sigma / 20;
  let peak = 0;
  for (let v = -2 * sigma; v < 700 + 2 * sigma; v += step) if (height(v) > height(peak)) peak = v;
  const half = 0.5 * height(peak);
  let low = peak;
  while (height(low) > half) low -= step;
  let high = peak;
  while (height(high) > half) high += step;
  const observed = high - low;
  return {
    logScale: fit.logScale + peak / SPEED_OF_LIGHT_KMS,
    fwhmKms: Math.sqrt(Math.max((0.3 * observed) ** 2, observed ** 2 - (2.3548 * lsfKms) ** 2)),
    wingShare: 1 - fit.amplitude[0] / total,
  };
}

/**
 * Systemic redshift of a Lyman-alpha emitter from its red peak: the peak lags by 0.9 FWHM - 34 km/s.
 * Source: Verhamme et al. (2018, MNRAS 478, L60), eq. 2: V_peak = 0.9(+-0.14) FWHM - 34(+-60) km/s.
 */
export function systemicRedshift(peakRedshift: number, fwhmKms: number): number {
  const lag = Math.max(0, 0.9 * fwhmKms - 34);
  return (1 + peakRedshift) / (1 + lag / SPEED_OF_LIGHT_KMS) - 1;
}

/**
 * Log likelihood ratio of "the continuum drops at Lyman-alpha as the intergalactic medium makes it" against "it goes on
 * as it is", from the mean flux within 60 Å (rest) on either side.
 *
 * Transmission exp(-0.0036 (1+z)^3.46) with a scatter of 0.2; without a break the ratio scatters by 0.15.
 * Source of the optical depth: Meiksin (2006, MNRAS 365, 807), form of Madau (1995) for the Lyman-alpha forest.
 *
 * @returns log ratio within [-40, 6]; 0 where a side has no data
 */
export function breakLogRatio(data: FitData, redshift: number): { logRatio: number; significance: number } {
  const mean = (from: number, to: number) => {
    let weight = 0;
    let sum = 0;
    const first = lowerBound(data.wavelength, from * (1 + redshift));
    const last = lowerBound(data.wavelength, to * (1 + redshift));
    for (let i = first; i < last; i++) {
      weight += data.weight[i];
      sum += data.weight[i] * data.flux[i];
    }
    return weight > 0 ? { value: sum / weight, variance: 1 / weight } : null;
  };
  const blue = mean(1145, 1205);
  const red = mean(1230, 1290);
  if (!blue || !red) return { logRatio: 0, significance: 0 };
  const transmission = Math.exp(-0.0036 * (1 + redshift) ** 3.46);
  const level = Math.max(0, red.value);
  const log = (difference: number, variance: number) =>
    -0.5 * ((difference * difference) / variance + Math.log(variance));
  const withBreak = log(
    blue.value - transmission * red.value,
    blue.variance + transmission ** 2 * red.variance + (0.2 * level) ** 2,
  );
  const without = log(blue.value - red.value, blue.variance + red.variance + (0.15 * level) ** 2);
  return {
    logRatio: Math.max(-40, Math.min(6, withBreak - without)),
    significance: (red.value - blue.value) / Math.sqrt(red.variance + blue.variance),
  };
}

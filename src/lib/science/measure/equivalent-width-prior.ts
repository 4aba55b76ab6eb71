import { SPEED_OF_LIGHT_KMS } from '../constants/physical';
import type { JointFit } from './fit/joint-fit';
import { pixelOf } from './fit/line-profile';
import { lowerBound } from './noise';
import type { WeighContext } from './weigh-context';

/**
 * Rest equivalent widths (ångström) that few objects exceed; common practice from surveys of extreme emitters, no single
 * source. Lyman-alpha has no entry: it may be any.
 */
const LARGE_WIDTHS: Readonly<Record<string, number>> = {
  'H-alpha 6565': 700,
  'H-beta 4863': 150,
  'H-gamma 4342': 70,
  'H-delta 4103': 40,
  '[O III] 5008': 700,
  '[O II] 3727': 60,
  '[O II] 3730': 70,
  '[N II] 6585': 200,
  '[S II] 6718': 80,
  '[S II] 6733': 80,
  '[O I] 6302': 50,
  '[Ne III] 3870': 60,
  '[Ne V] 3427': 40,
  'Mg II 2796': 12,
  'Mg II 2804': 12,
  '[C III] 1907': 12,
  'C III] 1909': 10,
  'C IV 1548': 25,
  'C IV 1551': 25,
  'He II 1640': 15,
  'He I 5877': 40,
  '[S III] 9533': 150,
  '[Ar III] 7138': 30,
  'He I 10833': 100,
  'Paschen-beta 12822': 150,
  'Paschen-alpha 18756': 300,
};
const SCATTER_LN = 0.5;

/**
 * Log prior of the narrow lines' rest equivalent widths: 0 while none is larger than its kind ever is, a log-normal fall
 * beyond. Each width is taken at its smallest within two sigma of flux and continuum, so that a faint continuum never
 * rules anything out.
 */
export function equivalentWidthPrior(context: WeighContext, fit: JointFit): number {
  const n = fit.components.length;
  const { data, continuum } = context;
  const stretch = Math.exp(fit.logScale);
  let log = 0;
  fit.components.forEach((component, i) => {
    const large = LARGE_WIDTHS[component.name];
    if (!large || component.width !== 0) return;
    const significance = fit.amplitude[i] * Math.sqrt(fit.gram[i * n + i]);
    if (!(significance > 4)) return;
    const centre = component.members[0].rest * stretch;
    const level = continuumBound(data, continuum, centre);
    const smallest = (fit.amplitude[i] * (1 - 2 / significance)) / (level * stretch);
    const excess = Math.log(smallest / large) / SCATTER_LN;
    if (excess > 0) log -= 0.5 * excess * excess;
  });
  return log;
}

/** Continuum near a wavelength plus two standard errors over 3,000 km/s on either side. */
function continuumBound(data: WeighContext['data'], continuum: Float64Array, centre: number): number {
  const pixel = pixelOf(data.edges, centre);
  const reach = (centre * 3000) / SPEED_OF_LIGHT_KMS;
  let weight = 0;
  const end = lowerBound(data.wavelength, centre + reach);
  for (let i = lowerBound(data.wavelength, centre - reach); i < end; i++) weight += data.weight[i];
  const error = weight > 0 ? 1 / Math.sqrt(weight) : 0;
  return Math.max(1e-9, Math.max(0, continuum[pixel]) * 1.1 + 2 * error);
}

import type { Derived, LineFit } from '$lib/domain/measurement';
import type { ExtinctionLaw } from '$lib/science/constants/extinction';
import { luminosityDistanceMpc, USUAL_COSMOLOGY, type FlatCosmology } from '$lib/science/cosmology/distances';
import {
  ACTIVE_NUCLEUS_DECREMENT,
  attenuationPerColourExcess,
  CASE_B,
  colourExcess,
  colourExcessFromDecrement,
  fluxRatio,
  type Measured,
} from './dust-from-balmer';
import { ionisationClass, type IonisationClass } from './ionisation-class';
import { luminosity, starFormationRate } from './star-formation';

const HALPHA = 'H-alpha 6565';
const HBETA = 'H-beta 4863';
const HGAMMA = 'H-gamma 4342';
const WAVELENGTHS: Record<string, number> = { [HALPHA]: 6564.61, [HBETA]: 4862.68, [HGAMMA]: 4341.68 };

/** A line counts as seen from this signal-to-noise ratio on (common practice, no source). */
export const SEEN = 3;

export interface DeriveOptions {
  cosmology?: FlatCosmology;
  law?: ExtinctionLaw;
  /** The engine's word for the object, which decides the intrinsic decrement where the lines themselves cannot tell. */
  objectClass?: string;
}

function measured(lines: readonly LineFit[], name: string): Measured | null {
  const line = lines.find((fit) => fit.line === name);
  return line && line.flux !== null && line.fluxError !== null && line.fluxError > 0
    ? { value: line.flux, error: line.fluxError }
    : null;
}

const seen = (line: Measured | null): line is Measured => line !== null && line.value >= SEEN * line.error;

/** Hydrogen fluxes by name. */
type HydrogenFluxes = Partial<Record<typeof HALPHA | typeof HBETA | typeof HGAMMA, number>>;

/** Colour excess from H-alpha / H-beta where both are given, else from H-gamma / H-beta; null where neither pair is there. */
function excessOf(fluxes: HydrogenFluxes, active: boolean, law: ExtinctionLaw): number | null {
  const { [HALPHA]: halpha, [HBETA]: hbeta, [HGAMMA]: hgamma } = fluxes;
  if (!(hbeta && hbeta > 0)) return null;
  if (halpha && halpha > 0) {
    const intrinsic = active ? ACTIVE_NUCLEUS_DECREMENT : CASE_B.halpha;
    return colourExcessFromDecrement({ value: halpha / hbeta, error: 0 }, intrinsic, law).value;
  }
  if (!(hgamma && hgamma > 0)) return null;
  const ratio = { value: hgamma / hbeta, error: 0 };
  return colourExcess(ratio, CASE_B.hgamma, WAVELENGTHS[HGAMMA], WAVELENGTHS[HBETA], law).value;
}

/**
 * H-alpha flux corrected for dust as far as it is measured; H-beta times the case B ratio where H-alpha is not seen.
 *
 * @param leastExcess 0 for the value, since dust does not brighten; -Infinity for its error, which noise below 0 does not make smaller
 */
function correctedHalpha(fluxes: HydrogenFluxes, law: ExtinctionLaw, leastExcess: number): number | null {
  const name = fluxes[HALPHA] ? HALPHA : HBETA;
  const flux = fluxes[name];
  if (!flux) return null;
  const excess = Math.max(leastExcess, excessOf(fluxes, false, law) ?? 0);
  const k = attenuationPerColourExcess(WAVELENGTHS[name], law);
  return (name === HALPHA ? flux : flux * CASE_B.halpha) * Math.pow(10, 0.4 * k * excess);
}

/** Value of a function of the seen hydrogen fluxes with its error: each flux moved by its own error in turn, effects added in squares. */
function propagate(lines: readonly LineFit[], of: (fluxes: HydrogenFluxes) => number | null): Measured | null {
  const fluxes: HydrogenFluxes = {};
  const errors: HydrogenFluxes = {};
  for (const name of [HALPHA, HBETA, HGAMMA] as const) {
    const line = measured(lines, name);
    if (!seen(line)) continue;
    fluxes[name] = line.value;
    errors[name] = line.error;
  }
  const value = of(fluxes);
  if (value === null) return null;
  let square = 0;
  for (const name of Object.keys(fluxes) as (keyof HydrogenFluxes)[]) {
    const up = of({ ...fluxes, [name]: fluxes[name]! + errors[name]! }) ?? value;
    const down = of({ ...fluxes, [name]: fluxes[name]! - errors[name]! }) ?? value;
    square += ((up - down) / 2) ** 2;
  }
  return { value, error: Math.sqrt(square) };
}

/**
 * What follows from line fluxes and a redshift: Balmer decrement, colour excess, luminosities, star-formation rate, ionisation class.
 *
 * Luminosities are as observed (not corrected for dust); the star-formation rate is corrected where the colour excess is measured from
 * lines seen at 3 sigma, and is not given for active nuclei or relative fluxes. Quantities whose lines are not there are null.
 *
 * @param lines fits of the chosen redshift, flux unit times ångström
 * @param redshift barycentric, taken as cosmological
 * @param fluxScaleCgs erg/s/cm2/Å of one flux unit; null for relative flux, which leaves luminosities out
 * @param upperLimits 3 sigma limits to carry along
 *
 * Sources: see the functions it calls; Kennicutt & Evans (2012), Cardelli et al. (1989), Kewley et al. (2001), Kauffmann et al. (2003).
 */
export function deriveQuantities(
  lines: readonly LineFit[],
  redshift: number,
  fluxScaleCgs: number | null,
  upperLimits: Record<string, number> = {},
  options: DeriveOptions = {},
): Derived {
  const { cosmology = USUAL_COSMOLOGY, law = 'cardelli-1989', objectClass } = options;
  const halpha = measured(lines, HALPHA);
  const hbeta = measured(lines, HBETA);
  const found: IonisationClass | null = ionisationClass({
    halpha,
    hbeta,
    nitrogen: measured(lines, '[N II] 6585'),
    oxygen: measured(lines, '[O III] 5008'),
  });
  const active = found === 'active nucleus' || (found === null && objectClass === 'active nucleus');
  const broad = objectClass === 'quasar';

  const decrement = seen(halpha) && seen(hbeta) && !broad ? fluxRatio(halpha, hbeta) : null;
  const excess = broad ? null : propagate(lines, (fluxes) => excessOf(fluxes, active, law));

  const toLuminosity = (flux: number) =>
    fluxScaleCgs === null ? null : luminosity(flux * fluxScaleCgs, redshift, cosmology);
  const luminosities: Record<string, number> = {};
  for (const { line, flux, signalToNoise } of lines) {
    const value = flux !== null && signalToNoise !== null && signalToNoise >= SEEN ? toLuminosity(flux) : null;
    if (value !== null) luminosities[line] = value;
  }
  const rateWith = (leastExcess: number) =>
    propagate(lines, (fluxes) => {
      const flux = correctedHalpha(fluxes, law, leastExcess);
      const bright = flux === null ? null : toLuminosity(flux);
      return bright === null ? null : starFormationRate(bright);
    });
  const rate = active || broad ? null : rateWith(0);
  const spread = rate ? rateWith(-Infinity) : null;
  return {
    balmerDecrement: decrement?.value ?? null,
    balmerDecrementError: decrement?.error ?? null,
    colourExcess: excess?.value ?? null,
    colourExcessError: excess?.error ?? null,
    luminosityDistanceMpc: redshift > 0 ? luminosityDistanceMpc(redshift, cosmology) : null,
    cosmology: { hubbleConstant: cosmology.hubbleConstant, omegaMatter: cosmology.omegaMatter },
    luminosities,
    starFormationRate: rate?.value ?? null,
    starFormationRateError: rate && spread ? rate.value * (spread.error / spread.value) : null,
    ionisationClass: found,
    upperLimits,
  };
}

import { parseFluxUnit } from '$lib/formats/units/flux-unit';
import { sameDimensions } from '$lib/formats/units/unit';
import { LINE_FLUX_UNIT, type ReleaseRow } from '$lib/domain/release';
import { lineByName } from '$lib/science/constants/lines';

const H_ALPHA = lineByName('H-alpha 6565').name;
const H_BETA = lineByName('H-beta 4863').name;
const OXYGEN_THREE = lineByName('[O III] 5008').name;
const OXYGEN_TWO = [lineByName('[O II] 3727').name, lineByName('[O II] 3730').name];

/** The lines a release publishes. */
export const PUBLISHED_LINES = [H_ALPHA, H_BETA, OXYGEN_THREE, ...OXYGEN_TWO];

const published = parseFluxUnit(`${LINE_FLUX_UNIT} Angstrom-1`).unit!;

/** What to multiply a line flux by so that it is in the published unit; null where the spectrum's flux is relative. */
export function scaleToPublished(spectrumFluxUnit: string | null): number | null {
  const { unit } = parseFluxUnit(spectrumFluxUnit);
  if (!unit || !sameDimensions(unit, published, 1)) return null;
  return Number(`${unit.factor / published.factor}e${Math.round(unit.exponentOfTen - published.exponentOfTen)}`);
}

interface LineFlux {
  flux: number | null;
  fluxError: number | null;
}

type PublishedFluxes = Pick<
  ReleaseRow,
  | 'hAlphaFlux'
  | 'hAlphaFluxError'
  | 'hBetaFlux'
  | 'hBetaFluxError'
  | 'o3Flux'
  | 'o3FluxError'
  | 'o2Flux'
  | 'o2FluxError'
  | 'fluxUnit'
>;

/**
 * The line columns of a row. [O II] is the sum of its two lines, errors in quadrature, and not known unless both are.
 *
 * @param scale of `scaleToPublished`
 */
export function publishedFluxes(lines: ReadonlyMap<string, LineFlux>, scale: number | null): PublishedFluxes {
  const line = (name: string): LineFlux => lines.get(name) ?? { flux: null, fluxError: null };
  const value = (flux: number | null) => (flux === null || scale === null ? null : flux * scale);
  const [short, long] = OXYGEN_TWO.map(line);
  const sum = short.flux === null || long.flux === null ? null : short.flux + long.flux;
  const sumError =
    sum === null || short.fluxError === null || long.fluxError === null
      ? null
      : Math.hypot(short.fluxError, long.fluxError);
  return {
    hAlphaFlux: value(line(H_ALPHA).flux),
    hAlphaFluxError: value(line(H_ALPHA).fluxError),
    hBetaFlux: value(line(H_BETA).flux),
    hBetaFluxError: value(line(H_BETA).fluxError),
    o3Flux: value(line(OXYGEN_THREE).flux),
    o3FluxError: value(line(OXYGEN_THREE).fluxError),
    o2Flux: value(sum),
    o2FluxError: value(sumError),
    fluxUnit: scale === null ? null : LINE_FLUX_UNIT,
  };
}

import { checkRawSpectrum } from '$lib/domain/check-raw-spectrum';
import { InputProblem } from '$lib/domain/input-problem';
import type { Medium, RawSpectrum } from '$lib/domain/spectrum';
import type { Wavelengths } from './axis/wavelengths';
import type { Cards } from './cards';
import type { Observation } from './observation/read-observation';
import { describePlace, type Place } from './place';
import { parseFluxUnit, scaleToFlux } from './units/flux-unit';

/** An array of a file with the unit its file gives it. */
export interface Quantity {
  values: Float64Array;
  unit: string | null;
}

/** The arrays of one spectrum, before units are reconciled. */
export interface SpectrumArrays {
  wavelengths: Wavelengths;
  medium: Medium | null;
  flux: Quantity;
  error?: Quantity;
  variance?: Quantity;
  inverseVariance?: Quantity;
  sky?: Quantity;
  /** Zero means good. */
  mask?: Float64Array;
  /** Zero means bad. */
  good?: Float64Array;
  lsfSigmaAngstrom?: Float64Array;
  lsfSigmaPixels?: Float64Array;
}

/** Variance in flux units squared from whatever the file gives; Infinity where it says that a pixel is worth nothing. */
function readVariance(arrays: SpectrumArrays, flux: ReturnType<typeof parseFluxUnit>): Float64Array | null {
  const usable = (value: number) => (value > 0 && Number.isFinite(value) ? value : Number.POSITIVE_INFINITY);
  if (arrays.error) {
    const scale = scaleToFlux(arrays.error.unit, flux, 1);
    return arrays.error.values.map((error) => (error > 0 ? usable((error * scale) ** 2) : Number.POSITIVE_INFINITY));
  }
  if (arrays.variance) {
    const scale = scaleToFlux(arrays.variance.unit, flux, 2);
    return arrays.variance.values.map((variance) => usable(variance * scale));
  }
  if (arrays.inverseVariance) {
    const scale = scaleToFlux(arrays.inverseVariance.unit, flux, -2);
    return arrays.inverseVariance.values.map((weight) =>
      weight > 0 ? usable(1 / (weight * scale)) : Number.POSITIVE_INFINITY,
    );
  }
  return null;
}

function readBad(arrays: SpectrumArrays): Uint8Array | null {
  const { mask, good } = arrays;
  if (mask) return Uint8Array.from(mask, (value) => (value === 0 ? 0 : 1));
  return good ? Uint8Array.from(good, (value) => (value > 0 ? 0 : 1)) : null;
}

function lsfInAngstrom(arrays: SpectrumArrays): Float64Array | null {
  if (arrays.lsfSigmaAngstrom) return arrays.lsfSigmaAngstrom;
  const pixels = arrays.lsfSigmaPixels;
  if (!pixels) return null;
  const { values, scaleAngstrom } = arrays.wavelengths;
  const last = values.length - 1;
  return pixels.map((sigma, i) => {
    const below = Math.max(0, i - 1);
    const above = Math.min(last, i + 1);
    return (sigma * Math.abs(values[above] - values[below]) * scaleAngstrom) / Math.max(1, above - below);
  });
}

/**
 * Makes a RawSpectrum of a spectrum's arrays and the header around them, units of errors brought to that of the flux.
 *
 * @throws InputProblem where lengths differ or the spectrum cannot be measured at all (see checkRawSpectrum).
 */
export function makeRawSpectrum(
  arrays: SpectrumArrays,
  observation: Observation,
  cards: Cards,
  place: Place,
): RawSpectrum {
  const warnings = [...observation.warnings];
  const fluxUnit = parseFluxUnit(arrays.flux.unit);
  if (fluxUnit.unknown) {
    warnings.push(`The flux unit '${fluxUnit.text?.slice(0, 60)}' is not known, so fluxes count as relative.`);
  }
  if (arrays.wavelengths.unitAssumed) warnings.push('The wavelengths have no unit and were read as ångström.');
  const skyScale = arrays.sky ? scaleToFlux(arrays.sky.unit, fluxUnit, 1) : 1;
  const raw: RawSpectrum = {
    extension: place.extension ?? 0,
    row: place.row ?? 1,
    name: observation.name,
    raDegrees: observation.raDegrees,
    decDegrees: observation.decDegrees,
    exposureSeconds: observation.exposureSeconds,
    wavelength: arrays.wavelengths.values,
    wavelengthScaleAngstrom: arrays.wavelengths.scaleAngstrom,
    flux: arrays.flux.values,
    fluxUnit: fluxUnit.text,
    variance: readVariance(arrays, fluxUnit),
    sky: arrays.sky ? (skyScale === 1 ? arrays.sky.values : arrays.sky.values.map((value) => value * skyScale)) : null,
    bad: readBad(arrays),
    resolvingPower: observation.resolvingPower,
    lsfSigmaAngstrom: lsfInAngstrom(arrays),
    frame: {
      medium: arrays.medium ?? arrays.wavelengths.medium,
      specsys: observation.specsys,
      midExposureJulianDateUtc: observation.midExposureJulianDateUtc,
      observatoryMetres: observation.observatoryMetres,
    },
    header: cards.toRecord(),
    warnings,
  };
  if (arrays.wavelengths.unitAssumed) raw.frame.wavelengthUnitAssumed = true;
  const problem = checkRawSpectrum(raw, describePlace(place));
  if (problem) {
    throw new InputProblem({
      ...problem,
      ...(place.extension === undefined ? {} : { extension: place.extension }),
      ...(place.row === undefined ? {} : { row: place.row }),
    });
  }
  return raw;
}

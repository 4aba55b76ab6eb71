import type { FitData } from './fit/fit-windows';

type NumberArray = Float64Array | Float32Array | readonly number[];

/** What a fit at a chosen redshift reads; all in the spectrum's own flux unit, vacuum ångström. */
export interface FitAtRedshiftInput {
  wavelength: NumberArray;
  /** Pixel edges, count + 1; derived from the centres where left out. */
  edges?: NumberArray;
  flux: NumberArray;
  /** Infinity or not above 0 = unusable. */
  variance: NumberArray;
  /** As `estimateContinuum` gives it. */
  continuum: NumberArray;
  /** Sigma of the line-spread function, ångström. */
  lsfSigma: NumberArray;
}

/** A spectrum is fitted again and again while a redshift is dragged: its data are made once. */
const made = new WeakMap<FitAtRedshiftInput, FitData>();

/** Turns input arrays into fit data, copying only where it must; once for an input, which must not change afterwards. */
export function fitDataOf(input: FitAtRedshiftInput): FitData {
  const data = made.get(input) ?? makeFitData(input);
  made.set(input, data);
  return data;
}

function makeFitData(input: FitAtRedshiftInput): FitData {
  const count = input.wavelength.length;
  const wavelength = float64(input.wavelength);
  const edges = input.edges ? float64(input.edges) : new Float64Array(count + 1);
  if (!input.edges) {
    for (let i = 1; i < count; i++) edges[i] = 0.5 * (wavelength[i - 1] + wavelength[i]);
    edges[0] = 2 * wavelength[0] - edges[1];
    edges[count] = 2 * wavelength[count - 1] - edges[count - 1];
  }
  const weight = new Float64Array(count);
  const flux = new Float64Array(count);
  for (let i = 0; i < count; i++) {
    const variance = input.variance[i];
    if (!(variance > 0) || variance === Infinity || !Number.isFinite(input.flux[i])) continue;
    weight[i] = 1 / variance;
    flux[i] = input.flux[i];
  }
  return { count, wavelength, edges, flux, weight, lsfSigma: float64(input.lsfSigma) };
}

function float64(values: NumberArray): Float64Array {
  return values instanceof Float64Array ? values : Float64Array.from(values);
}

import { axisExponent, axisTicks } from './layout/axis-ticks';
import { binColumns, binCurve } from './layout/bin-columns';
import { fluxScale, type FluxScale } from './layout/flux-scale';
import { pixelEdges, pixelGaps, pixelRange } from './layout/pixel-edges';
import { smoothInverseVariance } from './layout/smooth';
import { spectrumFrame } from './layout/spectrum-frame';
import { isInBand, type ObserverBands } from './observer-bands';

/** Arrays of a spectrum, one value a pixel; ReviewSpectrum has them. */
export interface PlottedSpectrum {
  wavelength: Float64Array;
  flux: Float64Array;
  error: Float64Array;
  sky: Float64Array | null;
  continuum: Float64Array;
}

interface Input {
  spectrum: PlottedSpectrum;
  view: { from: number; to: number };
  /** Gaussian sigma of the smoothing, pixels; 0 for none. */
  smoothPixels: number;
  bands: ObserverBands;
  /** Ends of the flux axis set by hand; null where they follow the data. */
  fluxRange: FluxScale | null;
  /** Factor on the height of an axis that follows the data. */
  fluxZoom: number;
  residuals: boolean;
}

/** Above this many pixels a column they are gathered, below it each is drawn as a step. */
const GATHER_FROM = 1.3;

/** Where everything in a spectrum plot stands; each part is worked out anew only when what it rests on changes. */
export class SpectrumGeometry {
  width = $state(0);
  height = $state(0);
  #input: () => Input;

  constructor(input: () => Input) {
    this.#input = input;
  }

  // One signal a field: a new view must not smooth the flux anew.
  #spectrum = $derived.by(() => this.#input().spectrum);
  #smoothPixels = $derived.by(() => this.#input().smoothPixels);
  #fluxRange = $derived.by(() => this.#input().fluxRange);
  #fluxZoom = $derived.by(() => this.#input().fluxZoom);
  #residuals = $derived.by(() => this.#input().residuals);
  #from = $derived.by(() => this.#input().view.from);
  #to = $derived.by(() => this.#input().view.to);
  #bands = $derived.by(() => this.#input().bands);

  frame = $derived.by(() => spectrumFrame(this.width, this.height, this.#spectrum.sky !== null, this.#residuals));
  edges = $derived.by(() => pixelEdges(this.#spectrum.wavelength));
  gaps = $derived.by(() => pixelGaps(this.edges, this.#spectrum.error));
  #smoothed = $derived.by(() => {
    const { flux, error } = this.#spectrum;
    return this.#smoothPixels > 0 ? smoothInverseVariance(flux, error, this.#smoothPixels) : { flux, error };
  });
  pixels = $derived.by(() => ({ ...this.#spectrum, ...this.#smoothed, edges: this.edges, gaps: this.gaps }));
  range = $derived.by(() => pixelRange(this.#spectrum.wavelength, this.#from, this.#to));
  perColumn = $derived.by(() => (this.range[1] - this.range[0]) / this.frame.plotWidth);

  columns = $derived.by(() => {
    if (this.perColumn <= GATHER_FROM) return null;
    return binColumns(this.pixels, this.#from, this.#to, Math.round(this.frame.plotWidth));
  });

  scale = $derived.by(() => {
    if (this.#fluxRange) return this.#fluxRange;
    const { bottom, top } = this.#dataScale;
    return { bottom, top: bottom + (top - bottom) * this.#fluxZoom };
  });
  #dataScale = $derived.by(() => {
    const { frame, columns, range } = this;
    const { wavelength, error } = this.#spectrum;
    const columnAngstrom = (this.#to - this.#from) / frame.plotWidth;
    // A column is as wide as it is: near a sky line is nearer in pixels when zoomed out.
    const margin = Math.max(0.5, columnAngstrom / 2);
    const drawn = columns
      ? columns.mean
      : this.pixels.flux.slice(...range).map((value, k) => (error[range[0] + k] > 0 ? value : NaN));
    const placeOf = (k: number) => (columns ? this.#from + (k + 0.5) * columnAngstrom : wavelength[range[0] + k]);
    return fluxScale(drawn, (k) => !isInBand(this.#bands.skyLines, placeOf(k), margin));
  });

  exponent = $derived.by(() => axisExponent(Math.max(this.scale.top, -this.scale.bottom)));
  fluxTicks = $derived.by(() => {
    const unit = 10 ** this.exponent;
    const count = this.frame.fluxBottom - this.frame.fluxTop < 150 ? 3 : 5;
    const { values, decimals } = axisTicks(this.scale.bottom / unit, this.scale.top / unit, count);
    return values.map((value) => ({ value: value * unit, text: value.toFixed(decimals) }));
  });

  toX = $derived.by(() => {
    const [{ left, plotWidth }, from, to] = [this.frame, this.#from, this.#to];
    return (wavelength: number) => left + ((wavelength - from) / (to - from)) * plotWidth;
  });
  toWavelength = $derived.by(() => {
    const [{ left, plotWidth }, from, to] = [this.frame, this.#from, this.#to];
    return (x: number) => from + ((x - left) / plotWidth) * (to - from);
  });
  toY = $derived.by(() => {
    const [{ fluxTop, fluxBottom }, { bottom, top }] = [this.frame, this.scale];
    return (flux: number) => fluxBottom - ((flux - bottom) / (top - bottom)) * (fluxBottom - fluxTop);
  });

  /** A curve in the columns of the flux, or null where single pixels are drawn. */
  binned(curve: Float64Array): Float64Array | null {
    return this.columns && binCurve(curve, this.pixels.error, this.columns);
  }
}

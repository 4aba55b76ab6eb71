import { STRONG_SKY_LINES, TELLURIC_BANDS } from '$lib/science/constants/sky';

/** A stretch of wavelength, ångström. */
export interface Band {
  from: number;
  to: number;
}

/** What the night sky and the air leave in a spectrum, in the spectrum's own frame. */
export interface ObserverBands {
  /** Strong sky emission lines, each as wide as it is drawn. */
  skyLines: Band[];
  /** Absorption by the air, with the formula of the molecule that does most of it. */
  telluric: (Band & { molecule: 'O2' | 'H2O' })[];
}

export const NO_BANDS: ObserverBands = { skyLines: [], telluric: [] };

/** Half the width at which a listed sky line is drawn, ångström. */
const LISTED_HALF_WIDTH = 4;
/** Pixels over which the sky's quiet level is taken: wider than a group of OH lines. */
const LEVEL_PIXELS = 160;
/** How far above the quiet level a sky spectrum, or an error spectrum without one, counts as a sky line. */
const SKY_FACTOR = 4;
const ERROR_FACTOR = 1.6;

/**
 * Sky lines and telluric bands of one spectrum. Lines come from the list and from the spectrum itself: where its sky
 * (or, without one, its error) stands well above the quiet level around it. The quiet level is the lower quartile over
 * 160 pixels; the factors were chosen by eye on simulated skies.
 */
export function observerBands(spectrum: {
  wavelength: Float64Array;
  error: Float64Array;
  sky: Float64Array | null;
  observerFactor: number;
}): ObserverBands {
  const { wavelength, error, sky, observerFactor } = spectrum;
  const [first, last] = [wavelength[0], wavelength[wavelength.length - 1]];
  const listed = STRONG_SKY_LINES.map((line) => line / observerFactor)
    .filter((line) => line > first && line < last)
    .map((line) => ({ from: line - LISTED_HALF_WIDTH, to: line + LISTED_HALF_WIDTH }));
  const seen = sky ? raised(wavelength, sky, SKY_FACTOR) : raised(wavelength, error, ERROR_FACTOR);
  const telluric = TELLURIC_BANDS.map(([from, to]) => ({
    from: from / observerFactor,
    to: to / observerFactor,
    // The B band at 6864 Å and the A band at 7590 Å are oxygen's; the others are water's in the main.
    molecule: from === 6864 || from === 7590 ? ('O2' as const) : ('H2O' as const),
  })).filter((band) => band.to > first && band.from < last);
  return { skyLines: merge([...listed, ...seen]), telluric };
}

/** Whether a wavelength lies within `margin` ångström of a band. */
export function isInBand(bands: readonly Band[], wavelength: number, margin = 0): boolean {
  return bands.some(({ from, to }) => wavelength >= from - margin && wavelength <= to + margin);
}

function raised(wavelength: Float64Array, values: Float64Array, factor: number): Band[] {
  const bands: Band[] = [];
  for (let start = 0; start < values.length; start += LEVEL_PIXELS / 2) {
    const [a, b] = [Math.max(0, start - LEVEL_PIXELS / 4), Math.min(values.length, start + (3 * LEVEL_PIXELS) / 4)];
    const sorted = values.slice(a, b).filter(Number.isFinite).sort();
    const level = sorted[Math.floor(sorted.length / 4)];
    if (!(level > 0)) continue;
    for (let i = start; i < Math.min(values.length, start + LEVEL_PIXELS / 2); i++) {
      if (!(values[i] > factor * level)) continue;
      const step = i > 0 ? wavelength[i] - wavelength[i - 1] : 0;
      bands.push({ from: wavelength[i] - step, to: wavelength[i] + step });
    }
  }
  return bands;
}

function merge(bands: Band[]): Band[] {
  const merged: Band[] = [];
  for (const band of bands.sort((a, b) => a.from - b.from)) {
    const last = merged[merged.length - 1];
    if (last && band.from <= last.to) last.to = Math.max(last.to, band.to);
    else merged.push({ ...band });
  }
  return merged;
}

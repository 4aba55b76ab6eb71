import type { Spectrum } from '$lib/domain/spectrum';
import { FWHM_PER_SIGMA, SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';
import { airToVacuum } from './air-vacuum';
import { fitPeak } from './fit-peak';
import { SKY_LINES } from './sky-line-list';

/** One sky line as fitted, in the observatory's frame. */
export interface SkyLineFit {
  name: string;
  /** Expected vacuum wavelength, ångström. */
  vacuumAngstrom: number;
  /** Where the spectrum has it against where it belongs, km/s; positive towards the red. */
  offsetKms: number;
  /** Sigma of the line, ångström in the observatory's frame, the pixel's own width taken out. */
  sigmaAngstrom: number;
}

/** The wavelength scale's zero point by the sky's own lines. */
export interface SkyLineCheck {
  /** Median offset, km/s. */
  offsetKms: number;
  /** Robust scatter of one line's offset, km/s (1.4826 MAD). */
  scatterKms: number;
  lines: SkyLineFit[];
}

/** The window reaches this many FWHM to each side: enough for the level, too little for the next line. */
const WINDOW_FWHM = 1.8;
/** A line is isolated where its neighbour is this many FWHM away. */
const ISOLATION_FWHM = 2;
const MIN_LINES = 3;
/** Fits whose peak does not stand out of what they leave over by this factor are no lines. */
const MIN_CONTRAST = 6;

function median(values: number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = sorted.length >> 1;
  return sorted.length % 2 === 1 ? sorted[middle] : (sorted[middle - 1] + sorted[middle]) / 2;
}

/** Index of the first pixel at or beyond a wavelength. */
function lowerBound(wavelength: Float64Array, value: number): number {
  let low = 0;
  let high = wavelength.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (wavelength[middle] < value) low = middle + 1;
    else high = middle;
  }
  return low;
}

/** Fits every sky line of the list that the sky spectrum shows, in the observatory's frame. */
function fitSkyLines(spectrum: Spectrum): SkyLineFit[] {
  const { sky, wavelength, edges, lsfSigma, observerFactor } = spectrum;
  const fits: SkyLineFit[] = [];
  if (!sky) return fits;
  for (const line of SKY_LINES) {
    const vacuumAngstrom = airToVacuum(line.airAngstrom);
    const here = vacuumAngstrom / observerFactor;
    const middle = lowerBound(wavelength, here);
    if (middle === 0 || middle >= wavelength.length) continue;
    const pixel = edges[middle + 1] - edges[middle];
    const sigma = Math.max(lsfSigma[middle], 0.8 * pixel);
    const fwhm = sigma * FWHM_PER_SIGMA;
    if (line.isolationAngstrom < ISOLATION_FWHM * fwhm) continue;
    const reach = Math.max(WINDOW_FWHM * fwhm, 4 * pixel);
    const from = lowerBound(wavelength, here - reach);
    const to = lowerBound(wavelength, here + reach);
    if (wavelength[Math.min(to, wavelength.length - 1)] - here < reach / 2 || here - wavelength[from] < reach / 2)
      continue;
    const x: number[] = [];
    const y: number[] = [];
    for (let i = from; i < to; i++) {
      if (!Number.isFinite(sky[i])) continue;
      x.push(wavelength[i] - here);
      y.push(sky[i]);
    }
    const peak = y.length === to - from ? fitPeak(x, y, sigma) : null;
    if (!peak || peak.amplitude < MIN_CONTRAST * peak.residual || Math.abs(peak.centre) > fwhm) continue;
    if (peak.sigma > 3 * sigma || peak.sigma < 0.3 * pixel) continue;
    fits.push({
      name: line.name,
      vacuumAngstrom,
      offsetKms: (peak.centre / here) * SPEED_OF_LIGHT_KMS,
      sigmaAngstrom: Math.sqrt(Math.max(0.01 * pixel ** 2, peak.sigma ** 2 - pixel ** 2 / 12)) * observerFactor,
    });
  }
  return fits;
}

/**
 * Checks the zero point of the wavelength scale against the night sky's own lines, [O I] and OH, fitted in the sky
 * spectrum in the observatory's frame.
 *
 * @returns null where the spectrum has no sky, or fewer than three lines stand out.
 */
export function checkSkyLines(spectrum: Spectrum): SkyLineCheck | null {
  const lines = fitSkyLines(spectrum);
  if (lines.length < MIN_LINES) return null;
  const offsetKms = median(lines.map((line) => line.offsetKms));
  const scatterKms = 1.4826 * median(lines.map((line) => Math.abs(line.offsetKms - offsetKms)));
  return { offsetKms, scatterKms, lines };
}

/**
 * Sigma of the line-spread function of every pixel, ångström, from the widths of the sky's lines: constant resolving
 * power or constant width, whichever they follow better.
 *
 * @returns null where the spectrum has no sky, or fewer than three lines stand out.
 */
export function lsfFromSkyLines(spectrum: Spectrum): Float64Array | null {
  const lines = fitSkyLines(spectrum);
  if (lines.length < MIN_LINES) return null;
  const widths = lines.map((line) => line.sigmaAngstrom);
  const relative = lines.map((line) => line.sigmaAngstrom / line.vacuumAngstrom);
  const spread = (values: number[]) => {
    const middle = median(values);
    return median(values.map((value) => Math.abs(value - middle))) / middle;
  };
  const { wavelength, observerFactor } = spectrum;
  if (spread(widths) < spread(relative))
    return new Float64Array(wavelength.length).fill(median(widths) / observerFactor);
  const inverseResolution = median(relative);
  return wavelength.map((angstrom) => angstrom * inverseResolution);
}

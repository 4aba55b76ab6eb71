import type { Instrument } from '$lib/domain/instrument';
import type { RawSpectrum, Spectrum } from '$lib/domain/spectrum';
import { FWHM_PER_SIGMA } from '$lib/science/constants/physical';

/** FWHM in pixels where nothing tells the resolution: spectrographs sample it by two to three (common practice, no source). */
export const ASSUMED_FWHM_PIXELS = 2.5;

/** Sigma of the line-spread function and where it comes from. */
export interface LineSpread {
  lsfSigma: Float64Array;
  lsfSource: Spectrum['lsfSource'];
}

/**
 * Sigma of the Gaussian line-spread function of every pixel, ångström: from the file's own array or resolving power,
 * else from the instrument, else 2.5 pixels of FWHM, said as assumed.
 *
 * @param wavelength pixel centres, increasing
 * @param edges pixel edges, n + 1 values
 * @param observerFactor takes a wavelength to the observatory's frame, where a table of resolutions holds
 * @param ownSigma the file's sigma a pixel in the order of `wavelength`, NaN where it has none; null where the file has no such array
 */
export function lineSpread(
  raw: RawSpectrum,
  instrument: Instrument | undefined,
  wavelength: Float64Array,
  edges: Float64Array,
  ownSigma: Float64Array | null,
  observerFactor = 1,
): LineSpread {
  if (ownSigma && ownSigma.some((sigma) => sigma > 0)) {
    return { lsfSigma: fillHoles(ownSigma), lsfSource: 'file' };
  }
  const ofPower = (power: number) => wavelength.map((angstrom) => angstrom / power / FWHM_PER_SIGMA);
  if (raw.resolvingPower) return { lsfSigma: ofPower(raw.resolvingPower), lsfSource: 'file' };
  if (instrument?.resolvingPower) return { lsfSigma: ofPower(instrument.resolvingPower), lsfSource: 'instrument' };
  const table = instrument?.resolutionTableAngstrom;
  if (table) {
    const lsfSigma = wavelength.map((angstrom) => valueInTable(table, angstrom * observerFactor) / FWHM_PER_SIGMA);
    return { lsfSigma, lsfSource: 'instrument' };
  }
  const fwhm = instrument?.resolutionFwhmAngstrom;
  if (fwhm)
    return { lsfSigma: new Float64Array(wavelength.length).fill(fwhm / FWHM_PER_SIGMA), lsfSource: 'instrument' };
  const lsfSigma = wavelength.map((_, i) => ((edges[i + 1] - edges[i]) * ASSUMED_FWHM_PIXELS) / FWHM_PER_SIGMA);
  return { lsfSigma, lsfSource: 'assumed' };
}

/** A straight line between the pairs of a table, its end values beyond its ends. */
function valueInTable(table: readonly (readonly [number, number])[], at: number): number {
  const next = table.findIndex(([wavelength]) => wavelength >= at);
  if (next < 0) return table[table.length - 1][1];
  if (next === 0) return table[0][1];
  const [[x0, y0], [x1, y1]] = [table[next - 1], table[next]];
  return y0 + ((y1 - y0) * (at - x0)) / (x1 - x0);
}

/** Values that are not positive take the nearest one that is, the earlier on a tie. */
function fillHoles(sigma: Float64Array): Float64Array {
  const filled = Float64Array.from(sigma);
  const holds = (value: number) => value > 0 && Number.isFinite(value);
  let last = -1;
  for (let i = 0; i < filled.length; i++) {
    if (!holds(sigma[i])) continue;
    const from = last < 0 ? 0 : last + 1 + ((i - last - 1) >> 1);
    if (last >= 0) filled.fill(sigma[last], last + 1, from);
    filled.fill(sigma[i], from, i);
    last = i;
  }
  if (last >= 0) filled.fill(sigma[last], last + 1);
  return filled;
}

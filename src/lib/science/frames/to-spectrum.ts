import { checkRawSpectrum } from '$lib/domain/check-raw-spectrum';
import type { Instrument } from '$lib/domain/instrument';
import { InputProblem } from '$lib/domain/input-problem';
import { MASK, type RawSpectrum, type Spectrum } from '$lib/domain/spectrum';
import { SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';
import { airToVacuum } from './air-vacuum';
import { fillGaps } from './fill-gaps';
import { lineSpread } from './line-spread';
import { pixelEdges } from './pixel-edges';
import { lsfFromSkyLines } from './sky-lines';
import { velocityFrame, type VelocityFrame } from './velocity-frame';

/** Indices of the pixels with a usable wavelength, by rising wavelength. */
function risingOrder(raw: RawSpectrum): Int32Array {
  const { wavelength } = raw;
  const order: number[] = [];
  for (let i = 0; i < wavelength.length; i++)
    if (wavelength[i] > 0 && Number.isFinite(wavelength[i] * raw.wavelengthScaleAngstrom)) order.push(i);
  const first = wavelength[order[0]];
  const last = wavelength[order[order.length - 1]];
  return Int32Array.from(last < first ? order.reverse() : order);
}

/** Vacuum, barycentric ångström of each pixel of `order`. */
function toBarycentricVacuum(raw: RawSpectrum, order: Int32Array, frame: VelocityFrame): Float64Array {
  const factor = 1 + (frame.barycentricKms ?? 0) / SPEED_OF_LIGHT_KMS;
  const isAir = frame.medium === 'air';
  return Float64Array.from(order, (i) => {
    const angstrom = raw.wavelength[i] * raw.wavelengthScaleAngstrom;
    return (isAir ? airToVacuum(angstrom) : angstrom) * factor;
  });
}

/** Variance of white noise from neighbouring differences, robust: (1.4826 MAD)² / 2; 1 where that is zero. */
function varianceOfDifferences(flux: Float64Array): number {
  const sizes: number[] = [];
  for (let i = 1; i < flux.length; i++) {
    const difference = Math.abs(flux[i] - flux[i - 1]);
    if (Number.isFinite(difference)) sizes.push(difference);
  }
  sizes.sort((a, b) => a - b);
  const spread = 1.4826 * (sizes[sizes.length >> 1] ?? 0);
  return spread > 0 ? spread ** 2 / 2 : 1;
}

const CGS_WORDS = /^(?:([\d.eE+-]+)\s+)?erg s-1 cm-2 Angstrom-1$/;

/** Value of one flux unit in erg/s/cm2/Å, or null for relative flux and counts. */
export function fluxScaleCgs(fluxUnit: string | null): number | null {
  const match = fluxUnit ? CGS_WORDS.exec(fluxUnit.trim()) : null;
  if (!match) return null;
  const scale = match[1] === undefined ? 1 : Number(match[1]);
  return scale > 0 && Number.isFinite(scale) ? scale : null;
}

function inBadRegion(angstrom: number, instrument?: Instrument): boolean {
  return instrument?.badRegionsAngstrom?.some(([from, to]) => angstrom >= from && angstrom <= to) ?? false;
}

interface PixelValues {
  flux: Float64Array;
  variance: Float64Array;
  mask: Uint16Array;
}

/** Flux, variance and mask in the new order. A pixel that can't be used has variance Infinity and, if it has no flux, flux 0. */
function pixelValues(
  raw: RawSpectrum,
  index: Int32Array,
  wavelength: Float64Array,
  observerFactor: number,
  instrument?: Instrument,
): PixelValues {
  const n = index.length;
  const values: PixelValues = { flux: new Float64Array(n), variance: new Float64Array(n), mask: new Uint16Array(n) };
  const estimated = raw.variance === null ? varianceOfDifferences(raw.flux) : Number.NaN;
  for (let i = 0; i < n; i++) {
    const from = index[i];
    const flux = from < 0 ? Number.NaN : raw.flux[from];
    const variance = from < 0 ? Number.POSITIVE_INFINITY : (raw.variance?.[from] ?? estimated);
    let bits = 0;
    if (!Number.isFinite(flux)) bits |= MASK.notFinite;
    if (!(variance > 0 && Number.isFinite(variance))) bits |= MASK.noVariance;
    if (from >= 0 && raw.bad?.[from]) bits |= MASK.fileMask;
    if (inBadRegion(wavelength[i] * observerFactor, instrument)) bits |= MASK.badRegion;
    values.flux[i] = Number.isFinite(flux) ? flux : 0;
    values.variance[i] = bits === 0 ? variance : Number.POSITIVE_INFINITY;
    values.mask[i] = bits;
  }
  return values;
}

/** The array in the new order; `missing` for fillers. */
function reorder(values: Float64Array | null, index: Int32Array, missing: number): Float64Array | null {
  return values && Float64Array.from(index, (from) => (from < 0 ? missing : values[from]));
}

/**
 * Turns what a file says into what the engine reads: vacuum, barycentric ångström, rising; gaps filled by masked
 * pixels; unusable pixels marked, with variance Infinity; line-spread function and flux scale found.
 *
 * @param raw one spectrum of a file
 * @param instrument supplies what the file lacks: medium, velocity frame, site, resolution, bad regions
 * @throws InputProblem where the spectrum cannot be measured at all (see checkRawSpectrum).
 */
export function toSpectrum(raw: RawSpectrum, instrument?: Instrument): Spectrum {
  const where = `${raw.name ?? 'spectrum'}, HDU ${raw.extension}, row ${raw.row}`;
  const problem = checkRawSpectrum(raw, where);
  if (problem) throw new InputProblem({ ...problem, extension: raw.extension, row: raw.row });

  const frame = velocityFrame(raw, instrument);
  const order = risingOrder(raw);
  const vacuum = toBarycentricVacuum(raw, order, frame);
  const stuck = vacuum.findIndex((value, i) => i > 0 && !(value > vacuum[i - 1]));
  if (stuck > 0) {
    throw new InputProblem({
      code: 'wavelength-repeated',
      what: `The wavelengths at ${vacuum[stuck]} Å lie closer than numbers can tell apart.`,
      where,
      mend: 'Check the wavelength axis: its step is too small for its values.',
      extension: raw.extension,
      row: raw.row,
    });
  }
  const { wavelength, source } = fillGaps(vacuum);
  const index = source.map((from) => (from < 0 ? -1 : order[from]));
  const edges = pixelEdges(wavelength);
  const values = pixelValues(raw, index, wavelength, frame.observerFactor, instrument);
  const spectrum: Spectrum = {
    name: raw.name,
    wavelength,
    edges,
    ...values,
    varianceKnown: raw.variance !== null,
    sky: reorder(raw.sky, index, Number.NaN),
    ...lineSpread(
      raw,
      instrument,
      wavelength,
      edges,
      reorder(raw.lsfSigmaAngstrom, index, Number.NaN),
      frame.observerFactor,
    ),
    observerFactor: frame.observerFactor,
    barycentricKms: frame.barycentricKms,
    medium: frame.medium,
    specsys: frame.specsys,
    fluxUnit: raw.fluxUnit,
    fluxScaleCgs: fluxScaleCgs(raw.fluxUnit),
    wavelengthDoubt: frame.doubt,
    warnings: [...raw.warnings, ...frame.warnings],
  };
  return spectrum.lsfSource === 'assumed' ? withSkyLineSpread(spectrum) : spectrum;
}

/** Where the sky's own lines tell the resolution, they replace the assumption. */
function withSkyLineSpread(spectrum: Spectrum): Spectrum {
  const lsfSigma = lsfFromSkyLines(spectrum);
  return lsfSigma ? { ...spectrum, lsfSigma, lsfSource: 'sky lines' } : spectrum;
}

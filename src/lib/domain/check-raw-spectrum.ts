import type { Problem } from './input-problem';
import type { RawSpectrum } from './spectrum';

/** Fewer pixels than this hold no line and its continuum. */
export const MIN_PIXELS = 16;
/** More pixels than this are no 1-D spectrum; it bounds the memory a hostile file can ask for. */
export const MAX_PIXELS = 4_000_000;

/** Spectra whole outside these bounds, ångström, have a wrong unit or are of no use here. */
const WAVELENGTH_BOUNDS = [100, 1e6];

/** First pixel that breaks the order of the wavelengths, or -1: they must rise or fall strictly. Pixels without a positive wavelength are passed over. */
function firstDisorder(wavelength: Float64Array): number {
  let previous = Number.NaN;
  let direction = 0;
  for (let i = 0; i < wavelength.length; i++) {
    const value = wavelength[i];
    if (!(value > 0) || value === Number.POSITIVE_INFINITY) continue;
    if (Number.isFinite(previous)) {
      const sign = Math.sign(value - previous);
      if (sign === 0 || (direction !== 0 && sign !== direction)) return i;
      direction = sign;
    }
    previous = value;
  }
  return -1;
}

/**
 * Whether a spectrum can be measured at all: enough pixels, arrays of one length, wavelengths that rise or fall
 * strictly, some finite flux, and not zero variance everywhere.
 *
 * @param where the place in words, for the problem's text
 * @returns the first thing that is wrong, or null.
 */
export function checkRawSpectrum(raw: RawSpectrum, where: string): Problem | null {
  const n = raw.wavelength.length;
  const lengths = [raw.flux, raw.variance, raw.sky, raw.bad, raw.lsfSigmaAngstrom].flatMap((array) =>
    array ? [array.length] : [],
  );
  if (lengths.some((length) => length !== n)) {
    return {
      code: 'lengths-differ',
      what: `There are ${n} wavelengths, but other arrays have ${lengths.join(', ')} values.`,
      where,
      mend: 'Give every array of a spectrum the same number of pixels.',
    };
  }
  if (n < MIN_PIXELS || n > MAX_PIXELS) {
    return {
      code: n < MIN_PIXELS ? 'too-few-pixels' : 'too-many-pixels',
      what: `The spectrum has ${n} pixels.`,
      where,
      mend: `A spectrum needs at least ${MIN_PIXELS} pixels and at most ${MAX_PIXELS}.`,
    };
  }
  const disorder = firstDisorder(raw.wavelength);
  if (disorder >= 0) {
    const repeated = raw.wavelength.indexOf(raw.wavelength[disorder]) < disorder;
    return {
      code: repeated ? 'wavelength-repeated' : 'wavelength-unordered',
      what: `The wavelengths are ${repeated ? 'repeated' : 'not in order'} at pixel ${disorder + 1} (${raw.wavelength[disorder]}).`,
      where,
      mend: 'Sort the pixels by wavelength, each wavelength once; merge overlapping arms before you hand them in.',
    };
  }
  return checkRange(raw, where) ?? checkValues(raw, where);
}

function checkRange(raw: RawSpectrum, where: string): Problem | null {
  let shortest = Number.POSITIVE_INFINITY;
  let longest = 0;
  for (const value of raw.wavelength) {
    const angstrom = value * raw.wavelengthScaleAngstrom;
    if (!(angstrom > 0) || angstrom === Number.POSITIVE_INFINITY) continue;
    shortest = Math.min(shortest, angstrom);
    longest = Math.max(longest, angstrom);
  }
  if (longest === 0 || (longest >= WAVELENGTH_BOUNDS[0] && shortest <= WAVELENGTH_BOUNDS[1])) return null;
  return {
    code: 'wavelength-out-of-range',
    what: `The wavelengths run from ${shortest.toPrecision(4)} to ${longest.toPrecision(4)} Å.`,
    where,
    mend: `Check the unit of the wavelengths: spectra between ${WAVELENGTH_BOUNDS[0]} Å and ${WAVELENGTH_BOUNDS[1]} Å are read.`,
  };
}

function checkValues(raw: RawSpectrum, where: string): Problem | null {
  const { wavelength, flux, variance, bad } = raw;
  let positive = 0;
  let finite = 0;
  let withVariance = 0;
  let usable = 0;
  for (let i = 0; i < wavelength.length; i++) {
    if (wavelength[i] > 0 && Number.isFinite(wavelength[i])) positive++;
    if (Number.isFinite(flux[i])) finite++;
    const weighed = variance === null || (variance[i] > 0 && Number.isFinite(variance[i]));
    if (weighed) withVariance++;
    if (weighed && Number.isFinite(flux[i]) && wavelength[i] > 0 && !bad?.[i]) usable++;
  }
  if (positive < MIN_PIXELS) {
    return {
      code: 'wavelength-invalid',
      what: 'The wavelengths are not positive numbers.',
      where,
      mend: 'Check the wavelength axis or column and its unit.',
    };
  }
  if (finite === 0) {
    return {
      code: 'flux-not-finite',
      what: 'No pixel has a finite flux: all are NaN or infinite.',
      where,
      mend: 'Hand in the reduction again, or leave this spectrum out.',
    };
  }
  if (withVariance === 0) {
    return {
      code: 'variance-zero',
      what: 'No pixel has an error or variance above zero.',
      where,
      mend: 'Give the errors, or leave out the error column so that the noise is estimated from the flux.',
    };
  }
  if (usable < MIN_PIXELS) {
    return {
      code: 'no-usable-pixels',
      what: `Only ${usable} pixels are finite, have an error and are not masked.`,
      where,
      mend: 'Check the mask (0 means good) and the errors.',
    };
  }
  return null;
}

import { z } from 'zod';
import { measurementSchema, type Measurement } from './measurement';

/** One spectrum as a reviewer sees it. All arrays have one value a pixel, wavelengths increasing. */
export interface ReviewSpectrum {
  id: string;
  name: string;
  /** Why the queue shows it, a sentence. */
  why: string;
  nightLabel: string;
  programme: string;
  instrument: string;
  /** For people, e.g. `3 × 900 s`. */
  exposure: string;
  /** Pixel centres, vacuum ångström, barycentric, strictly increasing. */
  wavelength: Float64Array;
  flux: Float64Array;
  /** 1 sigma, unit of flux; NaN where the pixel is unusable. */
  error: Float64Array;
  /** Sky spectrum, unit of flux; null where the file has none. */
  sky: Float64Array | null;
  continuum: Float64Array;
  /** Sigma of the Gaussian line-spread function, ångström. */
  lsfSigma: Float64Array;
  /** Multiply a wavelength by this to get the vacuum wavelength in the observatory's frame. */
  observerFactor: number;
  /** As the file gives it; null for relative flux. */
  fluxUnit: string | null;
  measurement: Measurement;
}

const ARRAYS = ['wavelength', 'flux', 'error', 'sky', 'continuum', 'lsfSigma'] as const;
type ArrayName = (typeof ARRAYS)[number];

/** `FGRS` in ASCII, read as a little-endian number: marks the bytes as ours before anything else is believed. */
const MAGIC = 0x53524746;
const VERSION = 1;
const PREAMBLE_BYTES = 12;

const headSchema = z.object({
  id: z.string(),
  name: z.string(),
  why: z.string(),
  nightLabel: z.string(),
  programme: z.string(),
  instrument: z.string(),
  exposure: z.string(),
  observerFactor: z.number().positive(),
  fluxUnit: z.string().nullable(),
  measurement: measurementSchema,
  pixels: z.number().int().min(0),
  hasSky: z.boolean(),
});

/** Bytes that are no review spectrum, or a damaged one. */
export class ReviewSpectrumError extends Error {
  override name = 'ReviewSpectrumError';
}

/**
 * Packs a review spectrum: magic, version and head length (uint32, little-endian), a JSON head padded to 8 bytes, then
 * the arrays. Wavelengths keep 64 bits; the rest travel as 32 bits, seven digits, which is more than any error bar needs.
 * @throws {ReviewSpectrumError} when the arrays differ in length
 */
export function encodeReviewSpectrum(spectrum: ReviewSpectrum): ArrayBuffer {
  const pixels = spectrum.wavelength.length;
  const present = ARRAYS.filter((name) => spectrum[name] !== null);
  for (const name of present) {
    const length = spectrum[name]?.length;
    if (length !== pixels) throw new ReviewSpectrumError(`${name} has ${length} values for ${pixels} pixels.`);
  }
  const { id, name, why, nightLabel, programme, instrument, exposure } = spectrum;
  const { observerFactor, fluxUnit, measurement, sky } = spectrum;
  const labels = { id, name, why, nightLabel, programme, instrument, exposure };
  const head = { ...labels, observerFactor, fluxUnit, measurement, pixels, hasSky: sky !== null };
  const text = new TextEncoder().encode(JSON.stringify(head satisfies z.input<typeof headSchema>));
  const start = Math.ceil((PREAMBLE_BYTES + text.length) / 8) * 8;
  const bytes = new ArrayBuffer(start + present.reduce((sum, array) => sum + pixels * bytesOf(array), 0));
  const preamble = new DataView(bytes);
  [MAGIC, VERSION, text.length].forEach((value, i) => preamble.setUint32(4 * i, value, true));
  new Uint8Array(bytes, PREAMBLE_BYTES, text.length).set(text);
  let offset = start;
  for (const array of present) {
    viewOf(array, bytes, offset, pixels).set(spectrum[array] ?? []);
    offset += pixels * bytesOf(array);
  }
  return bytes;
}

/**
 * Unpacks what encodeReviewSpectrum made.
 * @throws {ReviewSpectrumError} when the bytes are not such a spectrum, of another version, or cut short
 */
export function decodeReviewSpectrum(bytes: ArrayBuffer): ReviewSpectrum {
  if (bytes.byteLength < PREAMBLE_BYTES) throw new ReviewSpectrumError('The pixels arrived without a head.');
  const preamble = new DataView(bytes);
  const [magic, version, headBytes] = [0, 4, 8].map((at) => preamble.getUint32(at, true));
  if (magic !== MAGIC) throw new ReviewSpectrumError('These bytes are not the pixels of a spectrum.');
  if (version !== VERSION)
    throw new ReviewSpectrumError(`The pixels have layout ${version}; this page reads ${VERSION}.`);
  if (PREAMBLE_BYTES + headBytes > bytes.byteLength)
    throw new ReviewSpectrumError('The head of the pixels is cut short.');
  const { pixels, hasSky, ...rest } = parseHead(new Uint8Array(bytes, PREAMBLE_BYTES, headBytes));
  let offset = Math.ceil((PREAMBLE_BYTES + headBytes) / 8) * 8;
  const expected = ARRAYS.reduce((sum, name) => sum + (name === 'sky' && !hasSky ? 0 : pixels * bytesOf(name)), offset);
  if (bytes.byteLength !== expected) {
    throw new ReviewSpectrumError(`The pixels are cut short: ${bytes.byteLength} of ${expected} bytes arrived.`);
  }
  const read = (name: ArrayName) => {
    const values = Float64Array.from(viewOf(name, bytes, offset, pixels));
    offset += pixels * bytesOf(name);
    return values;
  };
  const [wavelength, flux, error] = [read('wavelength'), read('flux'), read('error')];
  const sky = hasSky ? read('sky') : null;
  return { ...rest, wavelength, flux, error, sky, continuum: read('continuum'), lsfSigma: read('lsfSigma') };
}

function parseHead(text: Uint8Array): z.output<typeof headSchema> {
  try {
    return headSchema.parse(JSON.parse(new TextDecoder('utf-8', { fatal: true }).decode(text)));
  } catch (cause) {
    throw new ReviewSpectrumError('The head of the pixels cannot be read.', { cause });
  }
}

const bytesOf = (name: ArrayName) => (name === 'wavelength' ? 8 : 4);

function viewOf(name: ArrayName, bytes: ArrayBuffer, offset: number, pixels: number): Float64Array | Float32Array {
  return name === 'wavelength' ? new Float64Array(bytes, offset, pixels) : new Float32Array(bytes, offset, pixels);
}

import { matchedFilter, rebinFilterInput, type FilterInput } from './matched-filter';
import { medianInPlace, selectInPlace } from './order-statistics';
import { Scratch } from './scratch';

/** Intrinsic velocity sigmas of the narrow kernels, km/s (FWHM 70 to 820). */
export const NARROW_SIGMAS_KMS: readonly number[] = [30, 90, 180, 350];
/** Velocity sigmas of stellar absorption lines, km/s: those of single stars, then those of galaxies. */
export const ABSORPTION_SIGMAS_KMS: readonly number[] = [80, 180, 350];
/** Intrinsic velocity sigmas of the broad kernels, km/s (FWHM 2,100 to 8,500). */
export const BROAD_SIGMAS_KMS: readonly number[] = [900, 1800, 3600];

/** A matched filter on a grid uniform in ln(wavelength), divided by its own noise. */
export interface GridFilter {
  sigmaKms: number;
  /** Numerator and information after scaling by the noise factor: flux = numerator / information. */
  numerator: Float64Array;
  information: Float64Array;
  /** Signal-to-noise at every node; 0 where nothing is known. */
  significance: Float64Array;
  noiseFactor: number;
}

/** Filters of one family of widths on one grid. */
export interface FilterBank {
  /** ln(wavelength) of the first node and spacing. */
  start: number;
  step: number;
  count: number;
  filters: GridFilter[];
}

const scratch = { significances: new Scratch(), numerator: new Scratch(), information: new Scratch() };

/**
 * Scatter of a filter's own output about its median, relative to what the declared variances promise, shrunk towards 1
 * by how few independent elements measure it: ln f is scaled by N / (N + 2.2 / max(0.15, |ln f|)^2), the ratio of the
 * prior variance of ln f to prior plus measurement variance (2.2 / N for the 35 % point).
 */
export function noiseFactorOf(significances: Float64Array, used: number, independent: number): number {
  if (used < 10 || independent < 3) return 1;
  const values = significances.subarray(0, used);
  const centre = medianInPlace(values, used);
  for (let i = 0; i < used; i++) values[i] = Math.abs(values[i] - centre);
  // 35 % of a Gaussian lies within 0.4538 sigma: lines may cover half of the spectrum before this feels them.
  const raw = selectInPlace(values, used, Math.floor(0.35 * used)) / 0.4538;
  if (!(raw > 0)) return 1;
  const log = Math.log(raw);
  const prior = Math.max(0.15, Math.abs(log));
  return Math.exp((log * independent) / (independent + 2.2 / (prior * prior)));
}

/**
 * Runs matched filters of several widths and puts them on a grid uniform in ln(wavelength), each scaled by its own
 * noise factor.
 *
 * @param check whether to measure the noise factor (else 1)
 */
export function filterBank(input: FilterInput, sigmasKms: readonly number[], step: number, check: boolean): FilterBank {
  const start = Math.log(input.wavelength[0]);
  const count = Math.max(2, Math.floor((Math.log(input.wavelength[input.count - 1]) - start) / step) + 1);
  const significances = scratch.significances.take(input.count);
  const filters = sigmasKms.map((sigmaKms) => {
    const middle = input.count >> 1;
    const pixelKms = ((input.edges[middle + 1] - input.edges[middle]) / input.wavelength[middle]) * 299792.458;
    const factor = Math.max(1, Math.min(16, Math.floor((0.6 * sigmaKms) / pixelKms)));
    const binned = sigmaKms > 500 ? rebinFilterInput(input, factor) : input;
    const output = matchedFilter(
      binned,
      sigmaKms,
      scratch.numerator.take(binned.count),
      scratch.information.take(binned.count),
    );
    let used = 0;
    for (let i = 0; i < binned.count; i++) {
      if (output.information[i] > 0) significances[used++] = output.numerator[i] / Math.sqrt(output.information[i]);
    }
    const noiseFactor = check ? noiseFactorOf(significances, used, used / Math.max(1, 3.545 * output.sigmaPixels)) : 1;
    return onGrid(binned, output.numerator, output.information, start, step, count, sigmaKms, noiseFactor);
  });
  return { start, step, count, filters };
}

function onGrid(
  input: FilterInput,
  numerator: Float64Array,
  information: Float64Array,
  start: number,
  step: number,
  count: number,
  sigmaKms: number,
  noiseFactor: number,
): GridFilter {
  const gridNumerator = new Float64Array(count);
  const gridInformation = new Float64Array(count);
  const significance = new Float64Array(count);
  const scale = 1 / (noiseFactor * noiseFactor);
  const root = Math.sqrt(scale);
  const { wavelength } = input;
  let i = 0;
  const ratio = Math.exp(step);
  let at = Math.exp(start);
  for (let k = 0; k < count; k++, at *= ratio) {
    while (i < input.count - 2 && wavelength[i + 1] <= at) i++;
    const span = wavelength[i + 1] - wavelength[i];
    const t = Math.max(0, Math.min(1, (at - wavelength[i]) / span));
    const a = information[i];
    const b = information[i + 1];
    if (!(a > 0) && !(b > 0)) continue;
    let n: number;
    let f: number;
    if (a > 0 && b > 0) {
      n = numerator[i] * (1 - t) + numerator[i + 1] * t;
      f = a * (1 - t) + b * t;
    } else {
      const j = a > 0 ? i : i + 1;
      if ((j === i ? t : 1 - t) > 0.6) continue;
      n = numerator[j];
      f = information[j];
    }
    gridNumerator[k] = n * scale;
    gridInformation[k] = f * scale;
    significance[k] = (n / Math.sqrt(f)) * root;
  }
  return { sigmaKms, numerator: gridNumerator, information: gridInformation, significance, noiseFactor };
}

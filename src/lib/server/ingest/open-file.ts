import { createHash } from 'node:crypto';
import { shapeNames } from '$lib/domain/file-shape';
import { InputProblem, type Problem } from '$lib/domain/problem';
import type { Instrument } from '$lib/domain/instrument';
import type { Spectrum } from '$lib/domain/spectrum';
import type { FileContent } from '$lib/domain/spectrum-summary';
import { exposureSpan } from '$lib/formats/observation/exposure-span';
import { describeColumns, needsAssignment } from '$lib/formats/describe-columns';
import { readSpectra } from '$lib/formats/read-spectra';
import { checkSkyLines } from '$lib/science/frames/sky-lines';
import { toSpectrum } from '$lib/science/frames/to-spectrum';
import { selectInPlace } from '$lib/science/measure/order-statistics';

/** Median of flux / sigma over usable pixels; null where there is none or the file gives no variance. */
function medianSignalToNoise(spectrum: Spectrum): number | null {
  if (!spectrum.varianceKnown) return null;
  const { flux, variance, mask } = spectrum;
  const ratios = new Float64Array(flux.length);
  let used = 0;
  for (let i = 0; i < flux.length; i++) {
    const ratio = mask[i] === 0 ? flux[i] / Math.sqrt(variance[i]) : NaN;
    if (Number.isFinite(ratio)) ratios[used++] = ratio;
  }
  return used > 0 ? selectInPlace(ratios, used, used >> 1) : null;
}

/**
 * Whether wavelengths can be taken to the observatory's frame, where sky lines stand still. Barycentric ones of a file
 * without time or position can't: their sky lines would show the Earth's motion, up to 30 km/s.
 */
function isObserverFrameKnown({ specsys, observerFactor }: Spectrum): boolean {
  return specsys === 'TOPOCENT' || observerFactor !== 1;
}

const JULIAN_DATE_OF_UNIX_EPOCH = 2_440_587.5;
/** Years that a DATETIME holds and a telescope may mean; a card beyond them says nothing. */
const KNOWN_YEARS = [1900, 2200] as const;

/** ISO 8601 of a Julian date on the UTC scale; null where unknown or outside all telescopes' time. */
function isoOfJulianDate(julianDate: number | null): string | null {
  if (julianDate === null) return null;
  const date = new Date((julianDate - JULIAN_DATE_OF_UNIX_EPOCH) * 86_400_000);
  const year = date.getUTCFullYear();
  return year >= KNOWN_YEARS[0] && year < KNOWN_YEARS[1] ? date.toISOString() : null;
}

/** What a file holds, and its spectra as the engine reads them, in the order of `content.spectra`. */
export interface OpenedFile {
  content: FileContent;
  spectra: Spectrum[];
}

/**
 * Reads a file's bytes; what is wrong with one spectrum loses none of the others. `wantsRow` tells which spectra are
 * asked for, by HDU (from 0) and row (from 1), where not all are.
 */
export function openFile(
  bytes: Uint8Array,
  fileName: string,
  instrument?: Instrument,
  wantsRow?: (extension: number, row: number) => boolean,
): OpenedFile {
  const { spectra: raws, problems: found } = readSpectra(bytes, fileName, instrument, wantsRow);
  const problems: Problem[] = [...found];
  const summaries: FileContent['spectra'] = [];
  const spectra: Spectrum[] = [];
  for (const raw of raws) {
    try {
      const spectrum = toSpectrum(raw, instrument);
      const sky = isObserverFrameKnown(spectrum) ? checkSkyLines(spectrum) : null;
      const { midExposureJulianDateUtc } = raw.frame;
      const span = exposureSpan(raw.header, midExposureJulianDateUtc, raw.exposureSeconds);
      spectra.push(spectrum);
      summaries.push({
        extension: raw.extension,
        row: raw.row,
        name: raw.name,
        raDegrees: raw.raDegrees,
        decDegrees: raw.decDegrees,
        exposureSeconds: raw.exposureSeconds,
        pixelCount: spectrum.wavelength.length,
        wavelengthMin: spectrum.wavelength[0],
        wavelengthMax: spectrum.wavelength[spectrum.wavelength.length - 1],
        medianSignalToNoise: medianSignalToNoise(spectrum),
        midExposure: isoOfJulianDate(midExposureJulianDateUtc),
        exposureStart: isoOfJulianDate(span?.start ?? null),
        exposureEnd: isoOfJulianDate(span?.end ?? null),
        skyOffsetKms: sky?.offsetKms ?? null,
        skyScatterKms: sky?.scatterKms ?? null,
        header: raw.header,
        warnings: [...raw.warnings, ...spectrum.warnings],
      });
    } catch (error) {
      if (!(error instanceof InputProblem)) throw error;
      problems.push(error.problem);
    }
  }
  if (needsAssignment(summaries.length, problems)) return { content: unassigned(bytes, fileName, problems), spectra };
  return { content: { spectra: summaries, problems }, spectra };
}

/** What is kept of a file whose columns cannot be told. One that cannot even be described keeps its problems as they are. */
function unassigned(bytes: Uint8Array, fileName: string, problems: Problem[]): FileContent {
  const parts = describeColumns(bytes, fileName);
  if (parts.length === 0) return { spectra: [], problems };
  const { what, where } = problems[0];
  const mend = 'Say once what its columns are; the instrument remembers it for every file like this one.';
  const shape = createHash('sha256').update(shapeNames(parts)).digest('hex');
  return { spectra: [], problems: [{ code: 'needs-assignment', what, where, mend }], shape };
}

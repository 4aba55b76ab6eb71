import { InputProblem, type Problem } from '$lib/domain/problem';
import type { Instrument } from '$lib/domain/instrument';
import type { Spectrum } from '$lib/domain/spectrum';
import type { FileContent } from '$lib/domain/spectrum-summary';
import { readSpectra } from '$lib/formats/read-spectra';
import { toSpectrum } from '$lib/science/frames/to-spectrum';

/** Median of flux / sigma over usable pixels; null where there is none or the file gives no variance. */
function medianSignalToNoise(spectrum: Spectrum): number | null {
  if (!spectrum.varianceKnown) return null;
  const ratios = spectrum.flux
    .map((flux, i) => (spectrum.mask[i] === 0 ? flux / Math.sqrt(spectrum.variance[i]) : NaN))
    .filter(Number.isFinite)
    .sort();
  return ratios.length ? ratios[ratios.length >> 1] : null;
}

/** What a file holds, and its spectra as the engine reads them, in the order of `content.spectra`. */
export interface OpenedFile {
  content: FileContent;
  spectra: Spectrum[];
}

/** Reads a file's bytes; what is wrong with one spectrum loses none of the others. */
export function openFile(bytes: Uint8Array, fileName: string, instrument?: Instrument): OpenedFile {
  const { spectra: raws, problems: found } = readSpectra(bytes, fileName, instrument);
  const problems: Problem[] = [...found];
  const summaries: FileContent['spectra'] = [];
  const spectra: Spectrum[] = [];
  for (const raw of raws) {
    try {
      const spectrum = toSpectrum(raw, instrument);
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
        header: raw.header,
        warnings: [...raw.warnings, ...spectrum.warnings],
      });
    } catch (error) {
      if (!(error instanceof InputProblem)) throw error;
      problems.push(error.problem);
    }
  }
  return { content: { spectra: summaries, problems }, spectra };
}

import type { Instrument } from '$lib/domain/instrument';
import type { Measurement } from '$lib/domain/measurement';
import type { MeasureResult } from '$lib/domain/measure-result';
import { InputProblem, type Problem } from '$lib/domain/input-problem';
import type { RawSpectrum, Spectrum } from '$lib/domain/spectrum';
import { readSpectra } from '$lib/formats/read-spectra';
import { withDerived } from '$lib/science/derive/with-derived';
import { toSpectrum } from '$lib/science/frames/to-spectrum';
import { measureSpectrum } from '$lib/science/measure/measure-spectrum';
import { completeSettingsHash } from './settings-hash';

/** Measures the named rows of a file's bytes; an input at fault gives its problem in its place. */
export function measureRows(
  bytes: Uint8Array,
  fileName: string,
  rows: { extension: number; row: number }[],
  instrument?: Instrument,
): MeasureResult[] {
  const { spectra } = readSpectra(bytes, fileName, instrument);
  return rows.map(({ extension, row }) => {
    try {
      return measureOne(toSpectrum(findRow(spectra, extension, row, fileName), instrument), instrument);
    } catch (error) {
      if (error instanceof InputProblem) return { problem: error.problem };
      throw error;
    }
  });
}

/** Measures a spectrum, with its derived quantities; the settings hash covers the instrument it was read by. */
export function measureOne(spectrum: Spectrum, instrument?: Instrument): { measurement: Measurement } {
  const measurement = withDerived(measureSpectrum(spectrum), spectrum);
  const { engine } = measurement;
  return { measurement: { ...measurement, engine: { ...engine, settings: completeSettingsHash(engine, instrument) } } };
}

function findRow(spectra: RawSpectrum[], extension: number, row: number, fileName: string): RawSpectrum {
  const raw = spectra.find((candidate) => candidate.extension === extension && candidate.row === row);
  if (raw) return raw;
  throw new InputProblem(rowMissing(extension, row, fileName));
}

/** A spectrum that its file gave once and gives no more. */
export const rowMissing = (extension: number, row: number, fileName: string): Problem => ({
  code: 'row-missing',
  what: `HDU ${extension}, row ${row} is no longer read as a spectrum.`,
  where: fileName,
  mend: 'Look at what the instrument says of its columns, or submit the file again.',
});

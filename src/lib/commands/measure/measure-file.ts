import { InputProblem } from '$lib/domain/input-problem';
import type { Instrument } from '$lib/domain/instrument';
import type { MeasureOutput, Measurement } from '$lib/domain/measurement';
import type { RawSpectrum } from '$lib/domain/spectrum';
import { readSpectra } from '$lib/formats/read-spectra';
import { withDerived } from '$lib/science/derive/with-derived';
import { toSpectrum } from '$lib/science/frames/to-spectrum';
import { measureSpectrum } from '$lib/science/measure/measure-spectrum';
import { explainMeasurement } from './explain-measurement';
import { problemLine, type MeasuredLine } from './measured-line';

/** What a thread is asked to do: one file, or every `parts`-th spectrum of it from `part` on. */
export interface MeasureTask {
  id: number;
  source: string;
  bytes: Uint8Array;
  instrument?: Instrument;
  explain: boolean;
  part: number;
  parts: number;
}

/** A fault of ours, not of the file: said with its stack, and the other spectra go on. */
function faultLine(source: string, raw: RawSpectrum, error: unknown): Omit<MeasuredLine, 'order'> {
  const message = error instanceof Error ? error.message : String(error);
  const output: MeasureOutput = {
    source,
    extension: raw.extension,
    row: raw.row,
    name: raw.name,
    error: `The measurement failed by a fault of the program: ${message}`,
  };
  const stack = error instanceof Error ? (error.stack ?? message) : message;
  return {
    json: JSON.stringify(output),
    notes: [`${source}, HDU ${raw.extension}, row ${raw.row}: ${stack}`],
    failed: true,
  };
}

function outputOf(source: string, raw: RawSpectrum, measurement: Measurement): MeasureOutput {
  return { source, extension: raw.extension, row: raw.row, name: raw.name, ...measurement };
}

function measureRaw(raw: RawSpectrum, task: MeasureTask): Omit<MeasuredLine, 'order'> {
  try {
    const spectrum = toSpectrum(raw, task.instrument);
    const measurement = withDerived(measureSpectrum(spectrum), spectrum);
    const where = `${task.source}, HDU ${raw.extension}, row ${raw.row}`;
    const notes = spectrum.warnings.map((warning) => `${where}: ${warning}`);
    if (task.explain) notes.push(...explainMeasurement(where, raw.name, measurement));
    // JSON has no NaN: what is not known becomes null here.
    return { json: JSON.stringify(outputOf(task.source, raw, measurement)), notes, failed: false };
  } catch (error) {
    if (error instanceof InputProblem) return problemLine(task.source, error.problem, raw.name);
    return faultLine(task.source, raw, error);
  }
}

/** Reads and measures one task's spectra; lines are numbered by HDU and row, problems among them. */
export function measureFile(task: MeasureTask): MeasuredLine[] {
  const { spectra, problems } = readSpectra(task.bytes, task.source, task.instrument);
  const entries = [
    ...problems.map((problem) => ({ extension: problem.extension ?? 0, row: problem.row ?? 1, problem, raw: null })),
    ...spectra.map((raw) => ({ extension: raw.extension, row: raw.row, problem: null, raw })),
  ].sort((a, b) => a.extension - b.extension || a.row - b.row);
  const lines: MeasuredLine[] = [];
  entries.forEach((entry, order) => {
    if (order % task.parts !== task.part) return;
    const line = entry.raw ? measureRaw(entry.raw, task) : problemLine(task.source, entry.problem!);
    lines.push({ order, ...line });
  });
  return lines;
}

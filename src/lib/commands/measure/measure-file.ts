import { InputProblem } from '$lib/domain/input-problem';
import type { Instrument } from '$lib/domain/instrument';
import type { MeasureOutput, Measurement } from '$lib/domain/measurement';
import type { RawSpectrum } from '$lib/domain/spectrum';
import { readSpectra } from '$lib/formats/read-spectra';
import { toSpectrum } from '$lib/science/frames/to-spectrum';
import { measureOne } from '$lib/server/measure/measure-rows';
import { explainMeasurement } from './explain-measurement';
import { problemLine, type MeasuredLine } from './measured-line';

/** What a thread is asked to do: one file, or of its rows those whose number modulo `parts` is `part`. */
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
    const { measurement } = measureOne(spectrum, task.instrument);
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

/** Rows of one HDU, at most, by which lines are numbered. */
const ROWS_AN_HDU = 2 ** 20;

/** Reads and measures one task's share of a file; lines are numbered by HDU and row, problems among them. */
export function measureFile(task: MeasureTask): MeasuredLine[] {
  const isOurs = (row: number) => row % task.parts === task.part;
  const { spectra, problems } = readSpectra(task.bytes, task.source, task.instrument, (_, row) => isOurs(row));
  const order = (extension = 0, row = 1) => extension * ROWS_AN_HDU + row;
  const lines: MeasuredLine[] = [];
  for (const problem of problems) {
    // What is wrong with the whole file or an HDU is found by every share, and told by one.
    if (!isOurs(problem.row ?? 1)) continue;
    lines.push({ order: order(problem.extension, problem.row), ...problemLine(task.source, problem) });
  }
  for (const raw of spectra) lines.push({ order: order(raw.extension, raw.row), ...measureRaw(raw, task) });
  return lines.sort((a, b) => a.order - b.order);
}

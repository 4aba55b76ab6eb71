import type { z } from 'zod';
import type { TrialAnswer } from '$lib/domain/column-assignment';
import type { assignmentSchema, Instrument } from '$lib/domain/instrument';
import { InputProblem } from '$lib/domain/input-problem';
import { Refusal } from '$lib/domain/refusal';
import type { RawSpectrum } from '$lib/domain/spectrum';
import { readSpectra } from '$lib/formats/read-spectra';
import { toSpectrum } from '$lib/science/frames/to-spectrum';
import { permit, type Actor } from '../auth/permissions';
import { findInstrument } from '../database/queries/instruments';
import { findUnassigned, type UnassignedFile } from '../database/queries/unassigned-files';
import { objects } from '../storage/storage';

/** Points of a plot: more than a screen has columns. */
const PLOTTED = 1600;

const NOTHING: Omit<TrialAnswer, 'problem'> = {
  spectra: 0,
  wavelengthAngstrom: [],
  flux: [],
  error: null,
  sky: null,
  pixels: 0,
  unusable: 0,
  fluxUnit: null,
  medium: null,
  warnings: [],
};

/** A file by its id; refuses where there is none. Asks for no permission: its callers do. */
export async function findFile(fileId: string): Promise<UnassignedFile> {
  const file = await findUnassigned(fileId);
  if (file) return file;
  throw new Refusal('not-found', 'There is no such file, or it belongs to a programme you are not in.');
}

/** Every so many pixels of an array, as many as a plot shows. */
function thinned(values: ArrayLike<number>, order: Int32Array, scale = 1): (number | null)[] {
  const step = Math.max(1, Math.ceil(order.length / PLOTTED));
  const kept: (number | null)[] = [];
  for (let i = 0; i < order.length; i += step) {
    const value = values[order[i]] * scale;
    kept.push(Number.isFinite(value) ? value : null);
  }
  return kept;
}

/** Where spectra of galaxies and quasars are taken, with room on both sides (common practice, no source). */
const isOptical = (angstrom: number) => angstrom >= 1000 && angstrom <= 60_000;
const oddRange = (angstrom: number) =>
  `The middle wavelength is ${Number(angstrom.toPrecision(4))} Å, where no optical spectrum is: look at the unit again.`;

function answerOf(raw: RawSpectrum, spectra: number, instrument: Instrument): TrialAnswer {
  // Throws where the engine could not take it: better told now than after the night.
  const { warnings, mask, medium } = toSpectrum(raw, instrument);
  const { wavelength, wavelengthScaleAngstrom: scale } = raw;
  const usable = Array.from(wavelength.keys()).filter((i) => wavelength[i] > 0 && Number.isFinite(wavelength[i]));
  const order = Int32Array.from(usable).sort((a, b) => wavelength[a] - wavelength[b]);
  const middle = wavelength[order[order.length >> 1]] * scale;
  return {
    spectra,
    wavelengthAngstrom: thinned(wavelength, order, scale) as number[],
    flux: thinned(raw.flux, order),
    error: raw.variance && thinned(raw.variance.map(Math.sqrt), order),
    sky: raw.sky && thinned(raw.sky, order),
    pixels: wavelength.length,
    unusable: mask.filter((bits) => bits !== 0).length,
    fluxUnit: raw.fluxUnit,
    medium,
    warnings: isOptical(middle) ? warnings : [oddRange(middle), ...warnings],
    problem: null,
  };
}

/** Reads a file as if an assignment were kept already: its first spectrum, or what is wrong in words. */
export async function readTrial(
  file: Pick<UnassignedFile, 'sha256' | 'name' | 'instrumentId'>,
  assignment: z.output<typeof assignmentSchema>,
): Promise<TrialAnswer> {
  const own = file.instrumentId ? await findInstrument(file.instrumentId) : null;
  const base: Instrument = own?.description ?? { name: 'trial' };
  const instrument = { ...base, assignments: [...(base.assignments ?? []), assignment] };
  let rows = 0;
  // Rows are counted and the first is read: a stack of thousands answers at once.
  const isFirst = () => rows++ === 0;
  const { spectra, problems } = readSpectra(await objects().read(file.sha256), file.name, instrument, isFirst);
  const [problem] = problems;
  if (spectra.length === 0) {
    const { what, mend } = problem ?? {
      what: 'The assignment gives no spectrum.',
      mend: 'Name a wavelength and a flux.',
    };
    return { ...NOTHING, problem: { what, mend } };
  }
  try {
    return answerOf(spectra[0], rows, instrument);
  } catch (error) {
    if (!(error instanceof InputProblem)) throw error;
    const { what, mend } = error.problem;
    return { ...NOTHING, problem: { what, mend } };
  }
}

/** What an assignment would make of a file, for a plot beside the form; nothing is kept. */
export async function tryAssignment(
  actor: Actor | null,
  fileId: string,
  assignment: z.output<typeof assignmentSchema>,
): Promise<TrialAnswer> {
  const file = await findFile(fileId);
  permit(actor, 'night.read', file.programmeId);
  return readTrial(file, assignment);
}

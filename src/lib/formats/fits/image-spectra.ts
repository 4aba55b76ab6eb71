import type { Instrument } from '$lib/domain/instrument';
import type { Problem } from '$lib/domain/input-problem';
import type { RawSpectrum } from '$lib/domain/spectrum';
import { assignedWavelengths } from '../axis/assigned-wavelengths';
import { readSpectralAxis } from '../axis/spectral-axis';
import { unknownUnit, wavelengthsFromValues, type Wavelengths } from '../axis/wavelengths';
import { assignedColumns, type AssignedColumns } from '../columns/assigned-columns';
import { roleOfName, type Role } from '../columns/roles';
import type { Table } from '../columns/table';
import { mediumOfName, mediumOfType, mediumOfWords } from '../medium';
import { readObservation } from '../observation/read-observation';
import { rowObservation, tellsRows } from '../observation/row-observation';
import { collectProblem, problemAt, type Place } from '../place';
import { checkRowCount, readRows, type ReadContext } from '../read-context';
import { makeRawSpectrum, type SpectrumArrays } from '../raw-spectrum';
import { parseSpectralUnit } from '../units/spectral-unit';
import { imageLayout, imageRow, type ImageLayout } from './image-layout';
import type { Hdu } from './read-hdus';
import { readPixels } from './read-image';

/** Pixels of the largest stack that is read: 256 MB for each of its arrays. */
const MAX_STACK_PIXELS = 32 * 1024 * 1024;

type Companions = Partial<Record<Role, Hdu>>;

/** Role of an image by the instrument description, its class cards (HDUCLAS), or its generic name. */
function imageRole(hdu: Hdu, { instrument, isAssigned }: AssignedColumns): Role | null {
  const wanted = instrument?.columns;
  for (const role of ['flux', 'error', 'variance', 'inverseVariance', 'mask', 'sky', 'wavelength'] as const) {
    const name = wanted?.[role];
    if (name !== undefined && (name.toLowerCase() === hdu.name.toLowerCase() || name === String(hdu.extension)))
      return role;
  }
  if (isAssigned) return null;
  const kind = hdu.cards.own('HDUCLAS2') ? hdu.cards.text('HDUCLAS2')?.toUpperCase() : null;
  const form = hdu.cards.own('HDUCLAS3') ? hdu.cards.text('HDUCLAS3')?.toUpperCase() : null;
  if (kind === 'ERROR') return form === 'MSE' ? 'variance' : form === 'INVMSE' ? 'inverseVariance' : 'error';
  if (kind === 'QUALITY') return 'mask';
  return roleOfName(hdu.name);
}

/** What an assignment calls an image: its name, or its number where it has none. */
export const imageName = (hdu: Hdu): string => hdu.name || String(hdu.extension);

function bareUnit(hdu: Hdu): string | null {
  return hdu.cards.own('BUNIT') ? hdu.cards.text('BUNIT') : null;
}

function companionWavelengths(
  hdu: Hdu,
  values: Float64Array,
  instrument: Instrument | undefined,
  place: Place,
): Wavelengths {
  const text =
    instrument?.columns?.wavelengthUnit ?? bareUnit(hdu) ?? (hdu.cards.own('CUNIT1') ? hdu.cards.text('CUNIT1') : null);
  const unit = text === null ? null : parseSpectralUnit(text);
  if (text !== null && !unit) throw unknownUnit(text, place, `the unit of HDU ${hdu.extension}`);
  const medium =
    mediumOfType(hdu.cards.own('CTYPE1') ? hdu.cards.text('CTYPE1') : null) ??
    mediumOfName(hdu.name) ??
    mediumOfWords(hdu.cards.own('BUNIT') ? null : hdu.cards.text('EXTDESC'));
  const scale = instrument?.columns?.wavelengthScale ?? (/^log/i.test(hdu.name) ? 'log10' : null);
  return wavelengthsFromValues(values, unit, scale, medium, place);
}

function samePixels(layout: ImageLayout, other: Hdu): boolean {
  const count = other.axes.reduce((product, length) => product * length, other.axes.length > 0 ? 1 : 0);
  return count === layout.rows * layout.pixels;
}

/** The images between this flux image and the next that belong to it, by role; wavelengths also from before it. */
function findCompanions(
  flux: Hdu,
  images: Hdu[],
  fluxes: Hdu[],
  layout: ImageLayout,
  assigned: AssignedColumns,
): Companions {
  const next = fluxes[fluxes.indexOf(flux) + 1];
  const companions: Companions = {};
  for (const hdu of images) {
    const role = imageRole(hdu, assigned);
    if (!role || role === 'flux' || fluxes.includes(hdu)) continue;
    const within = hdu.extension > flux.extension && (!next || hdu.extension < next.extension);
    const shared = role === 'wavelength' && (hdu.axes[0] === layout.pixels || samePixels(layout, hdu));
    if ((shared && (within || !companions[role])) || (samePixels(layout, hdu) && (within || fluxes.length === 1))) {
      companions[role] ??= hdu;
      if (within) companions[role] = hdu;
    }
  }
  return companions;
}

function notSpectra(hdu: Hdu, file: string, layout: ImageLayout | null): Problem {
  const shape = hdu.axes.join(' x ');
  const place = { file, extension: hdu.extension };
  if (layout && layout.rows === 1) {
    return problemAt(
      place,
      'image-without-wavelength',
      `The 1-D image of ${shape} pixels has no wavelength axis.`,
      'Give CTYPE1, CUNIT1, CRPIX1, CRVAL1 and CDELT1, or an extension with the wavelengths.',
    ).problem;
  }
  return problemAt(
    place,
    'image-not-spectra',
    `The image of ${shape} pixels is not a spectrum, nor a stack with one spectrum a row.`,
    'Extract 1-D spectra first; a stack needs a wavelength axis along its rows.',
  ).problem;
}

function tooLarge(hdu: Hdu, file: string): Problem {
  return problemAt(
    { file, extension: hdu.extension },
    'image-too-large',
    `The stack of ${hdu.axes.join(' x ')} pixels is larger than ${MAX_STACK_PIXELS} pixels.`,
    'Hand it in as several files.',
  ).problem;
}

/**
 * Spectra of the images of a FITS file: 1-D images and stacks with one spectrum a row, with their error, variance, mask,
 * sky and wavelength extensions. A fault in one row or image is added to `problems` and the others stand.
 */
export function imageSpectra(
  hdus: Hdu[],
  wanted: ReadonlySet<number>,
  tables: Table[],
  context: ReadContext,
): { spectra: RawSpectrum[]; notSpectra: Problem[] } {
  const { file, problems } = context;
  const images = hdus.filter((hdu) => hdu.kind === 'image' && hdu.axes.length > 0);
  const assigned = assignedColumns(images.map(imageName), context.instrument);
  const { instrument } = assigned;
  const fluxes = images.filter((hdu) => {
    const role = imageRole(hdu, assigned);
    return (
      role === 'flux' || (role === null && !assigned.isAssigned && (hdu.extension === 0 || imageLayout(hdu)?.axis))
    );
  });
  const spectra: RawSpectrum[] = [];
  const unusable: Problem[] = [];
  for (const flux of fluxes) {
    // Errors and masks may stand outside the HDU that a description names; the flux may not.
    if (!wanted.has(flux.extension)) continue;
    const layout = imageLayout(flux);
    const companions = layout ? findCompanions(flux, images, fluxes, layout, assigned) : {};
    if (!layout || (!layout.axis && !companions.wavelength && !instrument?.columns?.axis)) {
      unusable.push(notSpectra(flux, file, layout));
      continue;
    }
    if (layout.rows * layout.pixels > MAX_STACK_PIXELS) {
      unusable.push(tooLarge(flux, file));
      continue;
    }
    const read = collectProblem(problems, () => readImage(flux, layout, companions, tables, context, assigned));
    for (const raw of read ?? []) spectra.push(raw);
  }
  return { spectra, notSpectra: unusable };
}

function readImage(
  flux: Hdu,
  layout: ImageLayout,
  companions: Companions,
  tables: Table[],
  context: ReadContext,
  { instrument, medium }: AssignedColumns,
): RawSpectrum[] {
  const { file } = context;
  const place: Place = { file, extension: flux.extension };
  const observation = readObservation(flux.cards);
  const rowTable = layout.rows > 1 ? tables.find((table) => table.rows === layout.rows && tellsRows(table)) : undefined;
  checkRowCount(layout.rows, place);
  const count = layout.rows * layout.pixels;
  const pixels: Partial<Record<Role, Float64Array>> = { flux: readPixels(flux, 0, count) };
  for (const [role, hdu] of Object.entries(companions) as [Role, Hdu][]) {
    pixels[role] = readPixels(hdu, 0, samePixels(layout, hdu) ? count : layout.pixels);
  }
  const rowOf = (role: Role, row: number) => {
    const all = pixels[role]!;
    return all.length === layout.pixels ? all : imageRow(all, layout, row);
  };
  const ownWavelengths = pixels.wavelength !== undefined && pixels.wavelength.length !== layout.pixels;
  const wavelengthsOf = (row: number, at: Place) =>
    companions.wavelength
      ? companionWavelengths(companions.wavelength, rowOf('wavelength', row), instrument, at)
      : instrument?.columns?.axis
        ? assignedWavelengths(instrument.columns, layout.pixels, medium, at)
        : readSpectralAxis(flux.cards, layout.axis!, place);
  let shared: Wavelengths | null = null;
  const spectra: RawSpectrum[] = [];
  readRows(context, layout.rows, place, (row, at) => {
    // One axis serves all rows, unless every row has wavelengths of its own.
    if (ownWavelengths) shared = null;
    shared ??= wavelengthsOf(row, at);
    const arrays: SpectrumArrays = {
      wavelengths: shared,
      medium: medium ?? shared.medium,
      flux: { values: rowOf('flux', row), unit: instrument?.columns?.fluxUnit ?? bareUnit(flux) },
    };
    for (const role of ['error', 'variance', 'inverseVariance', 'sky'] as const) {
      if (companions[role]) arrays[role] = { values: rowOf(role, row), unit: bareUnit(companions[role]) };
    }
    if (companions.mask) arrays.mask = rowOf('mask', row);
    else if (companions.good) arrays.good = rowOf('good', row);
    const here = rowTable ? rowObservation(observation, rowTable, row) : observation;
    spectra.push(makeRawSpectrum(arrays, here, flux.cards, at));
  });
  return spectra;
}

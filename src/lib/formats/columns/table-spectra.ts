import type { Instrument } from '$lib/domain/instrument';
import type { Problem } from '$lib/domain/input-problem';
import type { Medium, RawSpectrum } from '$lib/domain/spectrum';
import { columnAxis, describesSpectralAxis, readSpectralAxis } from '../axis/spectral-axis';
import { assignedWavelengths } from '../axis/assigned-wavelengths';
import { unknownUnit, wavelengthsFromValues, type Wavelengths } from '../axis/wavelengths';
import { mediumOfName, mediumOfType, mediumOfUcd, mediumOfWords } from '../medium';
import { frameOfWords, readObservation } from '../observation/read-observation';
import { rowObservation } from '../observation/row-observation';
import { problemAt, type Place } from '../place';
import { checkRowCount, readRows, type ReadContext } from '../read-context';
import { makeRawSpectrum, type Quantity, type SpectrumArrays } from '../raw-spectrum';
import { parseSpectralUnit, type SpectralUnit } from '../units/spectral-unit';
import { assignedColumns } from './assigned-columns';
import { assignRoles, type Role, type Roles } from './roles';
import type { Column, Table } from './table';

const QUANTITIES = ['error', 'variance', 'inverseVariance', 'sky'] as const;
const PLAIN = ['mask', 'good', 'lsfSigmaAngstrom', 'lsfSigmaPixels'] as const;

/** Spectra of a table, and what is wrong with it. `notSpectra` is set where the table holds none at all. */
export interface TableSpectra {
  spectra: RawSpectrum[];
  notSpectra: Problem | null;
}

/** The medium as the table's own words and cards tell it. */
function tableMedium(table: Table, wavelength: Column): Medium | null {
  const index = table.columns.indexOf(wavelength) + 1;
  return (
    mediumOfType(wavelength.coordinateType) ??
    mediumOfType(table.cards.text(`1CTYP${index}`)) ??
    mediumOfUcd(wavelength.ucd) ??
    mediumOfWords(wavelength.description) ??
    mediumOfName(wavelength.name) ??
    mediumOfType(table.cards.text('CTYPE1')) ??
    oneMedium(table.remarks)
  );
}

function oneMedium(remarks: string[]): Medium | null {
  const media = new Set(remarks.map(mediumOfWords).filter((medium) => medium !== null));
  return media.size === 1 ? [...media][0] : null;
}

function wavelengthUnit(column: Column, instrument: Instrument | undefined, place: Place): SpectralUnit | null {
  const text = instrument?.columns?.wavelengthUnit ?? column.unit;
  if (text === null || text.trim() === '') return null;
  const unit = parseSpectralUnit(text);
  if (!unit) throw unknownUnit(text, place, `column ${column.name}`);
  return unit;
}

/** A log10 or ln column without a unit is of ångström, as practice has it. */
function readWavelengths(
  values: Float64Array,
  roles: Roles,
  unit: SpectralUnit | null,
  medium: Medium | null,
  place: Place,
): Wavelengths {
  return wavelengthsFromValues(values, unit, roles.wavelengthScale, medium, place);
}

function notSpectra(table: Table, file: string, roles: Roles): Problem {
  const missing = roles.columns.wavelength ? 'flux' : 'wavelength';
  const names = table.columns.slice(0, 12).map((column) => column.name);
  return problemAt(
    { file, extension: table.extension },
    `table-without-${missing}`,
    `The table has no ${missing} column; its columns are ${names.join(', ') || 'none'}${table.columns.length > 12 ? ' …' : ''}.`,
    `Name the column (such as ${missing === 'flux' ? 'flux' : 'wavelength'}), give it a UCD, or say which it is in an instrument description.`,
  ).problem;
}

/**
 * Spectra of a table: one where every row is a pixel, one a row where cells are vectors. A fault in one row is added
 * to `problems` and the other rows stand.
 */
export function tableSpectra(table: Table, context: ReadContext): TableSpectra {
  const { file } = context;
  const names = table.columns.map(({ name }) => name);
  const { instrument, medium: assignedMedium, isAssigned } = assignedColumns(names, context.instrument);
  const roles = assignRoles(table, instrument, isAssigned);
  const { wavelength, flux } = roles.columns;
  const place: Place = { file, extension: table.extension };
  const fluxAxis = flux?.isVector && !wavelength ? columnAxis(table.columns.indexOf(flux) + 1, 0) : null;
  const axisInHeader = fluxAxis !== null && describesSpectralAxis(table.cards, fluxAxis);
  const assignedAxis = instrument?.columns?.axis;
  if (!flux || (!wavelength && !axisInHeader && !assignedAxis))
    return { spectra: [], notSpectra: notSpectra(table, file, roles) };
  const observation = readObservation(table.cards);
  observation.specsys ??= frameOfWords(table.remarks);
  const medium = assignedMedium ?? (wavelength ? tableMedium(table, wavelength) : null);
  const spectra: RawSpectrum[] = [];

  const readOne = (read: (column: Column) => Float64Array, at: Place, row: number | null) => {
    const values = read(flux);
    const wavelengths = wavelength
      ? readWavelengths(read(wavelength), roles, wavelengthUnit(wavelength, instrument, place), medium, at)
      : instrument?.columns?.axis
        ? assignedWavelengths(instrument.columns, values.length, assignedMedium, at)
        : readSpectralAxis(table.cards, { ...fluxAxis!, length: values.length }, at);
    const arrays: SpectrumArrays = {
      wavelengths,
      medium: assignedMedium ?? wavelengths.medium,
      flux: { values, unit: instrument?.columns?.fluxUnit ?? flux.unit },
    };
    fillArrays(arrays, roles.columns, read);
    const here = row === null ? observation : rowObservation(observation, table, row);
    spectra.push(makeRawSpectrum(arrays, here, table.cards, at));
  };

  if (flux.isVector || wavelength?.isVector) {
    checkRowCount(table.rows, place);
    readRows(context, table.rows, place, (row, at) => readOne((column) => column.cell(row), at, row));
  } else {
    readRows(context, 1, place, (_, at) => readOne((column) => column.scalars(), at, null));
  }
  return { spectra, notSpectra: null };
}

function fillArrays(
  arrays: SpectrumArrays,
  columns: Partial<Record<Role, Column>>,
  read: (column: Column) => Float64Array,
): void {
  for (const role of QUANTITIES) {
    const column = columns[role];
    if (column) arrays[role] = { values: read(column), unit: column.unit } satisfies Quantity;
  }
  for (const role of PLAIN) {
    const column = columns[role];
    if (column) arrays[role] = read(column);
  }
}

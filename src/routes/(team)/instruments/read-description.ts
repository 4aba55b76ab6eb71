import { itrsToGeodetic } from '$lib/domain/geodetic-position';
import { instrumentSchema, type ColumnAssignment, type Instrument } from '$lib/domain/instrument';
import { Refusal } from '$lib/domain/refusal';

/** Roles of columns that the form asks for by name. */
export const FORM_COLUMNS = [
  'wavelength',
  'wavelengthUnit',
  'flux',
  'fluxUnit',
  'error',
  'variance',
  'inverseVariance',
  'mask',
  'sky',
] as const;

type Fields = Record<string, string>;

function refuse(what: string, mend: string, where: string): never {
  throw new Refusal('invalid', what, mend, where);
}

/** A number out of a field; undefined where it is empty. A decimal comma counts as a point. */
function numberIn(fields: Fields, name: string, label: string): number | undefined {
  const text = (fields[name] ?? '').trim();
  if (text === '') return undefined;
  const value = Number(text.replace(/^[\u2212\u2013]/, '-').replace(',', '.'));
  return Number.isFinite(value) ? value : refuse(`${label} is not a number: "${text}".`, 'Write it as 12.5.', name);
}

/** Lines of a field with numbers first, and what follows them. */
function linesIn(fields: Fields, name: string, label: string): [number, number, string][] {
  const lines = (fields[name] ?? '').split(/\r?\n/).map((line) => line.trim());
  return lines.flatMap((line, i) => {
    if (line === '') return [];
    const match = /^([\d.]+(?:[eE]\d+)?)[\s,;–-]+([\d.]+(?:[eE]\d+)?)(?:[\s,;:]+(.*))?$/.exec(line);
    if (!match) {
      refuse(`Line ${i + 1} of ${label} is "${line.slice(0, 40)}".`, 'Begin every line with two numbers.', name);
    }
    return [[Number(match[1]), Number(match[2]), (match[3] ?? '').trim()] as [number, number, string]];
  });
}

function siteIn(fields: Fields): Instrument['site'] {
  const [x, y, z] = ['siteX', 'siteY', 'siteZ'].map((name, i) => numberIn(fields, name, `OBSGEO-${'XYZ'[i]}`));
  if (fields.sitePlace === 'xyz') {
    if (x === undefined && y === undefined && z === undefined) return undefined;
    if (x === undefined || y === undefined || z === undefined) {
      refuse('The position has three numbers, X, Y and Z.', 'Write all three, in metres.', 'siteX');
    }
    const site = itrsToGeodetic([x, y, z]);
    if (!site) refuse('This position lies inside the Earth.', 'Write OBSGEO-X, -Y and -Z in metres.', 'siteX');
    const rounded = (value: number, digits: number) => Number(value.toFixed(digits));
    return {
      latitudeDegrees: rounded(site.latitudeDegrees, 8),
      longitudeEastDegrees: rounded(site.longitudeEastDegrees, 8),
      heightMetres: rounded(site.heightMetres, 3),
    };
  }
  const latitudeDegrees = numberIn(fields, 'latitude', 'The latitude');
  const longitudeEastDegrees = numberIn(fields, 'longitude', 'The longitude');
  const heightMetres = numberIn(fields, 'height', 'The height') ?? 0;
  if (latitudeDegrees === undefined && longitudeEastDegrees === undefined) return undefined;
  if (latitudeDegrees === undefined)
    refuse('The latitude is missing.', 'Write it in degrees, north positive.', 'latitude');
  if (longitudeEastDegrees === undefined) {
    refuse('The longitude is missing.', 'Write it in degrees, east positive.', 'longitude');
  }
  return { latitudeDegrees, longitudeEastDegrees, heightMetres };
}

function resolutionIn(fields: Fields): Partial<Instrument> {
  if (fields.resolution === 'power')
    return { resolvingPower: numberIn(fields, 'resolvingPower', 'The resolving power') };
  if (fields.resolution === 'fwhm') return { resolutionFwhmAngstrom: numberIn(fields, 'fwhm', 'The width') };
  if (fields.resolution !== 'table') return {};
  const pairs = linesIn(fields, 'resolutionTable', 'the widths').map(([at, fwhm]): [number, number] => [at, fwhm]);
  return { resolutionTableAngstrom: pairs };
}

function columnsIn(fields: Fields, before: ColumnAssignment | undefined): ColumnAssignment | undefined {
  const columns: Record<string, unknown> = { ...before };
  for (const name of [...FORM_COLUMNS, 'wavelengthScale']) {
    const text = (fields[`column-${name}`] ?? '').trim();
    if (text === '') delete columns[name];
    else columns[name] = text;
  }
  return Object.keys(columns).length > 0 ? (columns as ColumnAssignment) : undefined;
}

const FIELD_OF: Record<string, string> = {
  resolvingPower: 'resolvingPower',
  resolutionFwhmAngstrom: 'fwhm',
  resolutionTableAngstrom: 'resolutionTable',
  badRegionsAngstrom: 'badRegions',
  latitudeDegrees: 'latitude',
  longitudeEastDegrees: 'longitude',
  heightMetres: 'height',
  positionToleranceArcsec: 'positionTolerance',
};

/** A description that came as JSON or from the form, checked; refuses in words about the field at fault. */
export function checkDescription(value: unknown): Instrument {
  const result = instrumentSchema.safeParse(value);
  if (result.success) return result.data;
  const [{ message, path }] = result.error.issues;
  const where = path.map((step) => FIELD_OF[String(step)] ?? '').find((name) => name !== '') ?? String(path[0] ?? '');
  const place = path.length > 0 ? `${path.join('.')}: ` : '';
  throw new Refusal('invalid', `${place}${message}.`, '', where);
}

/**
 * The description that a form says. What the form does not ask for, such as assignments that are kept, stays as it was.
 *
 * @param before the version that is being changed, or null for a new instrument
 */
export function readDescription(form: FormData, before: Instrument | null): Instrument {
  const fields: Fields = {};
  for (const [name, value] of form) if (typeof value === 'string') fields[name] = value;
  const kept = (before?.assignments ?? []).filter((_, i) => !form.getAll('forget').includes(String(i)));
  const regions = linesIn(fields, 'badRegions', 'the bad regions').map(([from, to, reason]) =>
    reason === '' ? [from, to] : [from, to, reason],
  );
  const said = {
    name: before?.name ?? (fields.name ?? '').trim(),
    medium: fields.medium || undefined,
    specsys: fields.specsys || undefined,
    site: siteIn(fields),
    ...resolutionIn(fields),
    badRegionsAngstrom: regions.length > 0 ? regions : undefined,
    positionToleranceArcsec: numberIn(fields, 'positionTolerance', 'The tolerance'),
    columns: columnsIn(fields, before?.columns),
    assignments: kept.length > 0 ? kept : undefined,
  };
  return checkDescription(Object.fromEntries(Object.entries(said).filter(([, value]) => value !== undefined)));
}

import type { Instrument } from '$lib/domain/instrument';
import type { Problem } from '$lib/domain/input-problem';
import type { RawSpectrum } from '$lib/domain/spectrum';
import type { Table } from '../columns/table';
import { tableSpectra } from '../columns/table-spectra';
import { collectProblem, problemAt } from '../place';
import type { ReadContext } from '../read-context';
import { imageSpectra } from './image-spectra';
import { readHdus, type Hdu } from './read-hdus';
import { readTable } from './read-table';
import { uncompressImage } from './uncompress-image';
import { uncompressTable } from './uncompress-table';

function isWanted(hdu: Hdu, instrument?: Instrument): boolean {
  const wanted = instrument?.columns?.extension;
  if (wanted === undefined) return true;
  if (typeof wanted === 'number') return hdu.extension === wanted;
  return hdu.name.toLowerCase() === wanted.toLowerCase();
}

/**
 * The HDU itself, or what a compressed one unpacks to; null where it can't be unpacked. A method that is not read only
 * matters where the file has no other spectra, damage always does.
 */
function unpacked(hdu: Hdu, file: string, problems: Problem[], notRead: Problem[]): Hdu | null {
  if (hdu.kind !== 'compressed table' && hdu.kind !== 'compressed image') return hdu;
  const faults: Problem[] = [];
  const whole = collectProblem(faults, () =>
    hdu.kind === 'compressed table' ? uncompressTable(hdu, file) : uncompressImage(hdu, file),
  );
  for (const fault of faults) (fault.code === 'fits-tile-compressed' ? notRead : problems).push(fault);
  return whole;
}

/**
 * Reads every spectrum of a FITS file (FITS 4.0): image HDUs and tables. Faults of one HDU or row are added to
 * `problems`; HDUs that hold no spectra are passed over when others do, and explained when none does.
 */
export function readFits(bytes: Uint8Array, context: ReadContext): RawSpectrum[] {
  const { file, instrument, problems } = context;
  const notSpectra: Problem[] = [];
  const hdus = readHdus(bytes, file, problems).flatMap((hdu) => unpacked(hdu, file, problems, notSpectra) ?? []);
  const wanted = hdus.filter((hdu) => isWanted(hdu, instrument));
  const tables: Table[] = [];
  const spectra: RawSpectrum[] = [];
  for (const hdu of wanted) {
    if (hdu.kind !== 'binary table' && hdu.kind !== 'ascii table') continue;
    const table = collectProblem(problems, () => readTable(hdu, file));
    if (!table) continue;
    tables.push(table);
    const read = collectProblem(problems, () => tableSpectra(table, context));
    for (const raw of read?.spectra ?? []) spectra.push(raw);
    if (read?.notSpectra) notSpectra.push(read.notSpectra);
  }
  const extensions = new Set(wanted.map((hdu) => hdu.extension));
  const images = imageSpectra(hdus, extensions, tables, context);
  for (const raw of images.spectra) spectra.push(raw);
  notSpectra.push(...images.notSpectra);
  spectra.sort((a, b) => a.extension - b.extension || a.row - b.row);
  if (!context.recognised && problems.length === 0) problems.push(...notSpectra);
  if (!context.recognised && problems.length === 0) problems.push(nothingThere(hdus, wanted, file, instrument));
  return spectra;
}

function nothingThere(hdus: Hdu[], wanted: Hdu[], file: string, instrument?: Instrument): Problem {
  if (wanted.length === 0) {
    return problemAt(
      { file },
      'extension-missing',
      `There is no HDU '${String(instrument?.columns?.extension)}'; the file has ${hdus.map((hdu) => hdu.name || hdu.extension).join(', ')}.`,
      'Correct `columns.extension` in the instrument description.',
    ).problem;
  }
  return problemAt(
    { file },
    'fits-without-spectra',
    'None of its HDUs holds a spectrum.',
    'Hand in 1-D spectra as images or tables.',
  ).problem;
}

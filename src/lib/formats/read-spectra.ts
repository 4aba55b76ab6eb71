import type { Instrument } from '$lib/domain/instrument';
import type { Problem } from '$lib/domain/input-problem';
import type { RawSpectrum } from '$lib/domain/spectrum';
import { tableSpectra } from './columns/table-spectra';
import { readFits } from './fits/read-fits';
import { looksLikeFits } from './fits/read-hdus';
import { inflateGzip, looksLikeGzip, MAX_FILE_BYTES } from './inflate';
import { collectProblem, problemAt, type Place } from './place';
import type { ReadContext } from './read-context';
import { readTextTable } from './text/read-text-table';

/** Text tables beyond this size are no spectra; it bounds the memory that their cells take. */
const MAX_TEXT_BYTES = 32 * 1024 * 1024;
/** Lines of a text table: one a pixel, and its comments. */
const MAX_LINES = 2_000_000;

/** What a file holds: its spectra in file order, and what is wrong with it, with one HDU or with one row. */
export interface ReadSpectra {
  spectra: RawSpectrum[];
  problems: Problem[];
}

function isText(bytes: Uint8Array): boolean {
  const head = bytes.subarray(0, 4096);
  let control = 0;
  for (const byte of head) {
    if (byte === 0) return false;
    if (byte < 9 || (byte > 13 && byte < 32)) control++;
  }
  return control <= head.length / 100;
}

function readText(bytes: Uint8Array, place: Place, context: ReadContext): RawSpectrum[] {
  if (bytes.length > MAX_TEXT_BYTES) {
    throw problemAt(
      place,
      'text-too-large',
      `The text has ${bytes.length >> 20} MB.`,
      'Text tables are read up to 32 MB; use FITS for more.',
    );
  }
  let lines = 0;
  for (const byte of bytes) if (byte === 10 || byte === 13) lines++;
  if (lines > MAX_LINES) {
    throw problemAt(
      place,
      'text-too-large',
      `The text has ${lines} lines.`,
      `At most ${MAX_LINES} are read; use FITS for more.`,
    );
  }
  const { table, warnings } = readTextTable(new TextDecoder().decode(bytes), place);
  const { spectra, notSpectra } = tableSpectra(table, context);
  if (notSpectra) context.problems.push(notSpectra);
  for (const spectrum of spectra) spectrum.warnings.push(...warnings);
  return spectra;
}

function readBytes(bytes: Uint8Array, place: Place, context: ReadContext): RawSpectrum[] {
  if (bytes.length === 0 || bytes.every((byte) => byte === 0)) {
    throw problemAt(
      place,
      'empty-file',
      bytes.length === 0 ? 'The file is empty.' : 'The file holds zeros only.',
      'Copy the file again.',
    );
  }
  if (bytes.length > MAX_FILE_BYTES) {
    throw problemAt(
      place,
      'file-too-large',
      `The file has ${bytes.length >> 20} MB.`,
      'A file is at most 256 MB: hand it in as several.',
    );
  }
  if (looksLikeGzip(bytes)) {
    const inflated = inflateGzip(bytes, place);
    if (looksLikeGzip(inflated)) {
      throw problemAt(place, 'gzip-twice', 'The file is packed twice.', 'Unpack it once before handing it in.');
    }
    return readBytes(inflated, place, context);
  }
  if (looksLikeFits(bytes)) return readFits(bytes, context);
  if (/\.fits?(\.gz)?$/i.test(place.file) || !isText(bytes)) {
    throw problemAt(
      place,
      'not-fits',
      'The file is not FITS: it does not begin with SIMPLE, nor is it a text table.',
      'Hand in FITS, CSV, ECSV, or columns of numbers; copy the file again if it was FITS.',
    );
  }
  return readText(bytes, place, context);
}

/**
 * Reads every spectrum of a file, whatever its form, told by its content: FITS (images, stacks, tables), CSV, ECSV,
 * columns of numbers, each also gzipped. What is wrong with the file, an HDU or a row comes back as a problem and the
 * rest still stands; nothing is thrown for bad input.
 *
 * @param fileName the name that problems carry
 * @param instrument supplies what headers lack: columns, units, HDU (see the instrument description)
 * @param wantsRow which spectra to read, by HDU (from 0) and row (from 1), where not all of a large stack are needed
 */
export function readSpectra(
  bytes: Uint8Array,
  fileName: string,
  instrument?: Instrument,
  wantsRow: ReadContext['wantsRow'] = () => true,
): ReadSpectra {
  const problems: Problem[] = [];
  const context: ReadContext = { file: fileName, instrument, problems, wantsRow, recognised: false };
  const spectra = collectProblem(problems, () => readBytes(bytes, { file: fileName }, context)) ?? [];
  return { spectra, problems };
}

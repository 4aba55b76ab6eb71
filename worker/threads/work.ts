import type { Instrument } from '$lib/domain/instrument';
import type { MeasureResult } from '$lib/domain/measure-result';
import type { TakenFile } from '$lib/server/ingest/ingest-files';
import { openFile } from '$lib/server/ingest/open-file';
import { log } from '$lib/server/log/log';
import { measureOne, measureRows, rowMissing } from '$lib/server/measure/measure-rows';
import type { Remeasured } from '$lib/server/measure/remeasure-spectra';
import { objects } from '$lib/server/storage/storage';

interface File {
  sha256: string;
  name: string;
  instrument?: Instrument;
}

/** Reads a file and measures its spectra, if they are few; bytes come from storage by their hash, plain objects go back. */
export async function takeFile({ file, measureUpTo }: { file: File; measureUpTo: number }): Promise<TakenFile> {
  const start = performance.now();
  const { content, spectra } = openFile(await objects().read(file.sha256), file.name, file.instrument);
  const opened = performance.now();
  const reading = opened - start;
  if (spectra.length > measureUpTo) return { content, results: spectra.map(() => null), reading, engine: 0 };
  const results = spectra.map((spectrum) => {
    try {
      return measureOne(spectrum, file.instrument);
    } catch (error) {
      // A job of its own tries it again, and sets it aside in the end.
      log.error({ file: file.sha256, err: error }, 'measuring failed');
      return null;
    }
  });
  return { content, results, reading, engine: performance.now() - opened };
}

/** Measures the named rows of a file. */
export async function measureFile({
  file,
  rows,
}: {
  file: File;
  rows: { extension: number; row: number }[];
}): Promise<MeasureResult[]> {
  return measureRows(await objects().read(file.sha256), file.name, rows, file.instrument);
}

/** Reads and measures the named rows of a file anew; each with what its reading says of it now. */
export async function remeasureFile({
  file,
  rows,
}: {
  file: File;
  rows: { extension: number; row: number }[];
}): Promise<Remeasured[]> {
  const key = (extension = -1, row = -1) => `${extension} ${row}`;
  const asked = new Set(rows.map(({ extension, row }) => key(extension, row)));
  const bytes = await objects().read(file.sha256);
  const { content, spectra } = openFile(bytes, file.name, file.instrument, (extension, row) =>
    asked.has(key(extension, row)),
  );
  const read = new Map(content.spectra.map((summary, i) => [key(summary.extension, summary.row), i]));
  return rows.map(({ extension, row }) => {
    const i = read.get(key(extension, row));
    if (i !== undefined) return { result: measureOne(spectra[i], file.instrument), summary: content.spectra[i] };
    const own = content.problems.find((problem) => key(problem.extension, problem.row) === key(extension, row));
    const problem = own ?? content.problems.at(0) ?? rowMissing(extension, row, file.name);
    return { result: { problem }, summary: null };
  });
}

import type { Instrument } from '$lib/domain/instrument';
import type { MeasureResult } from '$lib/domain/measure-result';
import type { TakenFile } from '$lib/server/ingest/ingest-files';
import { openFile } from '$lib/server/ingest/open-file';
import { log } from '$lib/server/log/log';
import { measureOne, measureRows } from '$lib/server/measure/measure-rows';
import { objects } from '$lib/server/storage/storage';

interface File {
  sha256: string;
  name: string;
  instrument?: Instrument;
}

/** Reads a file and measures its spectra, if they are few; bytes come from storage by their hash, plain objects go back. */
export async function takeFile({ file, measureUpTo }: { file: File; measureUpTo: number }): Promise<TakenFile> {
  const { content, spectra } = openFile(await objects().read(file.sha256), file.name, file.instrument);
  if (spectra.length > measureUpTo) return { content, results: spectra.map(() => null) };
  const results = spectra.map((spectrum) => {
    try {
      return measureOne(spectrum, file.instrument);
    } catch (error) {
      // A job of its own tries it again, and sets it aside in the end.
      log.error({ file: file.sha256, err: error }, 'measuring failed');
      return null;
    }
  });
  return { content, results };
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

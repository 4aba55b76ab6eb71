import type { Instrument } from '$lib/domain/instrument';
import type { FileContent } from '$lib/domain/spectrum-summary';
import { summariseFile } from '$lib/server/ingest/summarise-file';
import { measureRows } from '$lib/server/measure/measure-rows';
import type { MeasureResult } from '$lib/server/measure/measure-spectra';
import { objects } from '$lib/server/storage/storage';

interface File {
  sha256: string;
  name: string;
  instrument?: Instrument;
}

/** What the threads do: bytes come from storage by their hash, plain objects go back. */
export async function readFile({ file }: { file: File }): Promise<FileContent> {
  return summariseFile(await objects().read(file.sha256), file.name, file.instrument);
}

export async function measureFile({
  file,
  rows,
}: {
  file: File;
  rows: { extension: number; row: number }[];
}): Promise<MeasureResult[]> {
  return measureRows(await objects().read(file.sha256), file.name, rows, file.instrument);
}

import type { Instrument } from '$lib/domain/instrument';
import type { MeasureResult } from '$lib/domain/measure-result';
import type { Problem } from '$lib/domain/problem';
import type { FileContent } from '$lib/domain/spectrum-summary';
import { inTransaction, type Transaction } from '../database/in-transaction';
import {
  countTry,
  findWaitingFiles,
  knowTargets,
  markFilesFailed,
  storeFileContents,
  type StoredFile,
} from '../database/queries/files';
import { storeMeasurements } from '../database/queries/measurements';
import { touchNightsOfFiles } from '../database/queries/nights';
import { log } from '../log/log';
import { nudge } from '../queue/nudge';
import { fulfil, wishFor } from '../queue/outbox';

/** Spectra measured by one job of a stack: enough that the queue's own cost vanishes, few enough that progress is seen. */
const SPECTRA_PER_JOB = 16;
/** Files of more spectra than this are read first and measured by jobs of their own, so that many threads share them. */
const MEASURED_AT_ONCE = 16;
const TRIES = 3;

export interface TakenFile {
  content: FileContent;
  /** One a spectrum, in order; null where measuring is left to a job of its own. */
  results: (MeasureResult | null)[];
  /** Milliseconds that reading and measuring took on the thread. */
  reading: number;
  engine: number;
}

/** Reads stored bytes on another thread, and measures up to `measureUpTo` spectra while they are in hand. */
export type TakeFile = (
  file: { sha256: string; name: string; instrument?: Instrument },
  measureUpTo: number,
) => Promise<TakenFile>;

/**
 * The ingest job: reads stored files and measures their spectra, then writes spectra, measurements, problems and the
 * wishes for what is left in one transaction. Run twice, the second changes nothing. A batch that failed is cut into
 * single files; from its second try on a file is only read, so that a spectrum which takes the engine down loses no
 * other; after three it is set aside.
 */
export async function ingestFiles(fileIds: string[], jobId: string, take: TakeFile): Promise<void> {
  const tries = await countTry('files', fileIds);
  const files = await findWaitingFiles(fileIds);
  if (tries > 1 && files.length > 1) return cut(files, jobId);

  const taken = await Promise.allSettled(
    files.map(({ sha256, originalName: name, instrument }) => {
      if (tries > TRIES) throw new Error('set aside after three tries');
      return take({ sha256, name, instrument: instrument ?? undefined }, tries > 1 ? 0 : MEASURED_AT_ONCE);
    }),
  );
  const read: { file: StoredFile; taken: TakenFile }[] = [];
  const failed: StoredFile[] = [];
  taken.forEach((result, i) => {
    if (result.status === 'fulfilled') read.push({ file: files[i], taken: result.value });
    else {
      log.error({ file: files[i].id, tries, err: result.reason }, 'reading a file failed');
      failed.push(files[i]);
    }
  });
  const again = failed.length > 0 && tries < TRIES;
  if (again && files.length === 1) throw new Error(`reading failed; it is tried again (${jobId})`);

  const start = performance.now();
  // Targets first and alone: making them holds the programme's register, which the long transaction would keep.
  await inTransaction((transaction) => knowTargets(contentsOf(read), transaction));
  const nights = await inTransaction(async (transaction) => {
    await store(read, transaction);
    if (again) await wishForSingles(failed, transaction);
    else
      await markFilesFailed(
        failed.map((file) => [file.id, readerFault(file.originalName)]),
        transaction,
      );
    await fulfil([jobId], transaction);
    return touchNightsOfFiles(
      files.map(({ id }) => id),
      transaction,
    );
  });
  const sum = (of: 'reading' | 'engine') => read.reduce((total, { taken }) => total + taken[of], 0);
  const stages = { reading: sum('reading'), engine: sum('engine'), inserting: performance.now() - start };
  log.debug({ job: jobId, files: files.length, stages }, 'files taken');
  for (const nightId of nights) nudge('nights', nightId);
  nudge('outbox');
}

const contentsOf = (read: { file: StoredFile; taken: TakenFile }[]) =>
  read.map(({ file, taken }) => ({ file, content: taken.content }));

async function store(read: { file: StoredFile; taken: TakenFile }[], transaction: Transaction): Promise<void> {
  const ids = await storeFileContents(contentsOf(read), transaction);
  const results = new Map<string, MeasureResult>();
  const instruments = new Map<string, string | null>();
  const waiting: string[] = [];
  read.forEach(({ file, taken }, i) =>
    ids[i].forEach((spectrumId, k) => {
      const result = taken.results[k];
      instruments.set(spectrumId, file.instrumentId);
      if (result) results.set(spectrumId, result);
      else waiting.push(spectrumId);
    }),
  );
  await storeMeasurements(results, transaction, instruments);
  const wishes = [];
  for (let i = 0; i < waiting.length; i += SPECTRA_PER_JOB) {
    const spectrumIds = waiting.slice(i, i + SPECTRA_PER_JOB);
    wishes.push({ jobId: `measure-${spectrumIds[0]}-${spectrumIds.length}`, payload: { spectrumIds } });
  }
  await wishFor('measure', wishes, transaction);
}

function wishForSingles(files: StoredFile[], transaction: Transaction): Promise<void> {
  return wishFor(
    'ingest',
    files.map(({ id }) => ({ jobId: `ingest-${id}-1`, payload: { fileIds: [id] } })),
    transaction,
  );
}

async function cut(files: StoredFile[], jobId: string): Promise<void> {
  await inTransaction(async (transaction) => {
    await wishForSingles(files, transaction);
    await fulfil([jobId], transaction);
  });
  nudge('outbox');
}

const readerFault = (name: string): Problem => ({
  code: 'reader-fault',
  what: 'The reader failed on this file three times.',
  where: name,
  mend: 'Check that it opens elsewhere; if it does, send it to the maintainers, for the fault is ours.',
});

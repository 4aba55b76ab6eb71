import type { Instrument } from '$lib/domain/instrument';
import type { FileContent } from '$lib/domain/spectrum-summary';
import { inTransaction } from '../database/in-transaction';
import { countTry, findFile, markFileFailed, storeFileContent } from '../database/queries/files';
import { touchNightsOfFile } from '../database/queries/nights';
import { log } from '../log/log';
import { nudge } from '../queue/nudge';
import { fulfil, wishFor } from '../queue/outbox';

/** Spectra measured by one job: enough that the queue's own cost vanishes, few enough that progress is seen. */
const SPECTRA_PER_JOB = 16;
const TRIES = 3;

/** Reads and summarises stored bytes, on another thread. */
export type ReadFile = (file: { sha256: string; name: string; instrument?: Instrument }) => Promise<FileContent>;

/**
 * The ingest job: reads a stored file, then writes its spectra, its problems and the wishes to measure in one
 * transaction. Run twice, the second changes nothing. A file that has taken the reader down three times is set aside.
 */
export async function ingestFile(fileId: string, jobId: string, read: ReadFile): Promise<void> {
  const tries = await countTry('files', [fileId]);
  const file = await findFile(fileId);
  if (!file || file.state !== 'waiting') return inTransaction((transaction) => fulfil([jobId], transaction));

  let content: FileContent;
  try {
    if (tries > TRIES) throw new Error('set aside after three tries');
    content = await read({ sha256: file.sha256, name: file.originalName, instrument: file.instrument ?? undefined });
  } catch (error) {
    log.error({ fileId, tries, err: error }, 'reading a file failed');
    if (tries < TRIES) throw error;
    return settle(fileId, () =>
      inTransaction(async (transaction) => {
        await markFileFailed(fileId, [readerFault(file.originalName)], transaction);
        await fulfil([jobId], transaction);
        return touchNightsOfFile(fileId, transaction);
      }),
    );
  }

  await settle(fileId, () =>
    inTransaction(async (transaction) => {
      const spectrumIds = await storeFileContent(file, content, transaction);
      const wishes = [];
      for (let i = 0; i < spectrumIds.length; i += SPECTRA_PER_JOB) {
        const ids = spectrumIds.slice(i, i + SPECTRA_PER_JOB);
        wishes.push({ jobId: `measure-${ids[0]}-${ids.length}`, payload: { spectrumIds: ids } });
      }
      await wishFor('measure', wishes, transaction);
      await fulfil([jobId], transaction);
      return touchNightsOfFile(fileId, transaction);
    }),
  );
  nudge('outbox');
}

async function settle(fileId: string, write: () => Promise<string[]>): Promise<void> {
  for (const nightId of await write()) nudge('nights', nightId);
  log.debug({ fileId }, 'file settled');
}

const readerFault = (name: string) => ({
  code: 'reader-fault',
  what: 'The reader failed on this file three times.',
  where: name,
  mend: 'Check that it opens elsewhere; if it does, send it to the maintainers, for the fault is ours.',
});

import type { Instrument } from '$lib/domain/instrument';
import type { MeasureResult } from '$lib/domain/measure-result';
import type { Problem } from '$lib/domain/problem';
import { inTransaction } from '../database/in-transaction';
import { countTry } from '../database/queries/files';
import { findWaiting, storeMeasurements, type WaitingSpectrum } from '../database/queries/measurements';
import { touchNightsOfFiles } from '../database/queries/nights';
import { log } from '../log/log';
import { nudge } from '../queue/nudge';
import { fulfil, wishFor } from '../queue/outbox';

const TRIES = 3;

/** Measures rows of one stored file, on another thread; one result a row, in order. */
export type MeasureRows = (
  file: { sha256: string; name: string; instrument?: Instrument },
  rows: { extension: number; row: number }[],
) => Promise<MeasureResult[]>;

/**
 * The measure job: a batch of spectra, measured and stored in one transaction. Spectra measured already are passed
 * over. A batch that failed is cut into single spectra, so that a poisoned one is found; after three tries it is set
 * aside with its reason, and the night goes on.
 */
export async function measureSpectra(spectrumIds: string[], jobId: string, measure: MeasureRows): Promise<void> {
  const tries = await countTry('spectra', spectrumIds);
  if (tries > 1 && spectrumIds.length > 1) return split(spectrumIds, jobId);
  const waiting = await findWaiting(spectrumIds);
  const results = new Map<string, MeasureResult>();
  for (const group of byFile(waiting)) {
    const { sha256, originalName, instrument } = group[0];
    const file = { sha256, name: originalName, instrument: instrument ?? undefined };
    try {
      if (tries > TRIES) throw new Error('set aside after three tries');
      const measured = await measure(
        file,
        group.map(({ extension, rowIndex }) => ({ extension, row: rowIndex })),
      );
      group.forEach(({ id }, i) => results.set(id, measured[i]));
    } catch (error) {
      log.error({ jobId, tries, err: error }, 'measuring failed');
      if (tries < TRIES) throw error;
      group.forEach(({ id, originalName: name }) => results.set(id, { problem: engineFault(name) }));
    }
  }
  const nights = await inTransaction(async (transaction) => {
    await storeMeasurements(results, transaction, new Map(waiting.map(({ id, instrumentId }) => [id, instrumentId])));
    await fulfil([jobId], transaction);
    return touchNightsOfFiles([...new Set(waiting.map(({ fileId }) => fileId))], transaction);
  });
  for (const nightId of nights) nudge('nights', nightId);
}

async function split(spectrumIds: string[], jobId: string): Promise<void> {
  await inTransaction(async (transaction) => {
    const wishes = spectrumIds.map((id) => ({ jobId: `measure-${id}-1`, payload: { spectrumIds: [id] } }));
    await wishFor('measure', wishes, transaction);
    await fulfil([jobId], transaction);
  });
  nudge('outbox');
}

function byFile(spectra: WaitingSpectrum[]): WaitingSpectrum[][] {
  const groups = new Map<string, WaitingSpectrum[]>();
  for (const spectrum of spectra) groups.set(spectrum.fileId, [...(groups.get(spectrum.fileId) ?? []), spectrum]);
  return [...groups.values()];
}

const engineFault = (name: string): Problem => ({
  code: 'engine-fault',
  what: 'Measuring this spectrum failed three times.',
  where: name,
  mend: 'Look at the spectrum; if it is sound, send it to the maintainers, for the fault is ours.',
});

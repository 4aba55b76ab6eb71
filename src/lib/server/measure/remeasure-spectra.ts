import type { Instrument } from '$lib/domain/instrument';
import type { MeasureResult } from '$lib/domain/measure-result';
import type { Problem } from '$lib/domain/problem';
import type { SpectrumSummary } from '$lib/domain/spectrum-summary';
import { inTransaction } from '../database/in-transaction';
import { touchNightsOfFiles } from '../database/queries/nights';
import {
  countRemeasureTry,
  findToRemeasure,
  storeRemeasured,
  type RemeasuredSpectrum,
  type SpectrumToRemeasure,
} from '../database/queries/remeasured-spectra';
import { endIfDone } from '../database/queries/remeasures';
import { log } from '../log/log';
import { nudge } from '../queue/nudge';
import { fulfil, wishFor } from '../queue/outbox';

const TRIES = 3;

/** A spectrum measured again, with what its reading says of it now; null where it could not be read. */
export interface Remeasured {
  result: MeasureResult;
  summary: SpectrumSummary | null;
}

/** Reads and measures rows of one stored file, on another thread; one result a row, in order. */
export type RemeasureRows = (
  file: { sha256: string; name: string; instrument?: Instrument },
  rows: { extension: number; row: number }[],
) => Promise<Remeasured[]>;

export const remeasureJobId = (remeasureId: string, spectrumIds: string[]): string =>
  `remeasure-${remeasureId}-${spectrumIds[0]}-${spectrumIds.length}`;

/**
 * The remeasure job: spectra measured by the engine and the instrument as they are now, stored beside what was there in
 * one transaction. Run twice or cancelled meanwhile, it changes nothing. A batch that failed is cut into single spectra;
 * after three tries one is set aside and keeps its older measurement.
 */
export async function remeasureSpectra(
  { remeasureId, spectrumIds }: { remeasureId: string; spectrumIds: string[] },
  jobId: string,
  measure: RemeasureRows,
): Promise<void> {
  const tries = await countRemeasureTry(remeasureId, spectrumIds);
  if (tries > 1 && spectrumIds.length > 1) return split(remeasureId, spectrumIds, jobId);
  const waiting = await findToRemeasure(remeasureId, spectrumIds);
  const results: RemeasuredSpectrum[] = [];
  for (const group of byFile(waiting)) {
    try {
      if (tries > TRIES) throw new Error('set aside after three tries');
      results.push(...(await measureGroup(group, measure)));
    } catch (error) {
      log.error({ jobId, tries, err: error }, 'measuring again failed');
      if (tries < TRIES) throw error;
      for (const { id, instrumentId, originalName } of group) {
        results.push({ id, instrumentId, outcome: { problem: engineFault(originalName) } });
      }
    }
  }
  const nights = await inTransaction(async (transaction) => {
    await storeRemeasured(remeasureId, results, transaction);
    await fulfil([jobId], transaction);
    await endIfDone(remeasureId, transaction);
    return touchNightsOfFiles([...new Set(waiting.map(({ fileId }) => fileId))], transaction);
  });
  for (const nightId of nights) nudge('nights', nightId);
}

async function measureGroup(group: SpectrumToRemeasure[], measure: RemeasureRows): Promise<RemeasuredSpectrum[]> {
  const { sha256, originalName: name, instrument } = group[0];
  const rows = group.map(({ extension, rowIndex }) => ({ extension, row: rowIndex }));
  const measured = await measure({ sha256, name, instrument: instrument ?? undefined }, rows);
  return group.map(({ id, instrumentId }, i) => {
    const { result, summary } = measured[i];
    if ('problem' in result) return { id, instrumentId, outcome: { problem: result.problem } };
    return { id, instrumentId, outcome: { measurement: result.measurement, summary: summary! } };
  });
}

async function split(remeasureId: string, spectrumIds: string[], jobId: string): Promise<void> {
  await inTransaction(async (transaction) => {
    const wishes = spectrumIds.map((id) => ({
      jobId: remeasureJobId(remeasureId, [id]),
      payload: { remeasureId, spectrumIds: [id] },
    }));
    await wishFor('remeasure', wishes, transaction);
    await fulfil([jobId], transaction);
  });
  nudge('outbox');
}

function byFile(spectra: SpectrumToRemeasure[]): SpectrumToRemeasure[][] {
  const groups = new Map<string, SpectrumToRemeasure[]>();
  for (const spectrum of spectra) {
    const group = groups.get(spectrum.fileId);
    if (group) group.push(spectrum);
    else groups.set(spectrum.fileId, [spectrum]);
  }
  return [...groups.values()];
}

const engineFault = (name: string): Problem => ({
  code: 'engine-fault',
  what: 'Measuring this spectrum again failed three times; its older measurement stands.',
  where: name,
  mend: 'Look at the spectrum; if it is sound, send it to the maintainers, for the fault is ours.',
});

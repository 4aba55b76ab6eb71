import type { Transaction } from 'sequelize';
import type { Instrument } from '$lib/domain/instrument';
import { isOffList, POSITION_TOLERANCE_ARCSEC, positionDoubt } from '$lib/domain/position-doubt';
import type { Problem } from '$lib/domain/problem';
import type { FileContent } from '$lib/domain/spectrum-summary';
import { placeTargets } from './place-targets';
import { listedTargets } from './target-register';

export interface PlacedSpectrum {
  targetId: string;
  /** Set where the header names a listed target and puts it elsewhere. */
  positionDoubt: Problem | null;
}

interface PlacedFile {
  programmeId: string;
  originalName: string;
  instrument: Instrument | null;
}

/** The target of each spectrum of these files of one programme, in order, and what is odd about its position. */
export async function placeSpectra(
  entries: readonly { file: PlacedFile; content: FileContent }[],
  transaction: Transaction,
): Promise<PlacedSpectrum[]> {
  const wanted = entries.flatMap(({ file, content }) =>
    content.spectra.map(({ name, raDegrees, decDegrees }) => ({
      name: (name ?? file.originalName).slice(0, 200),
      raDegrees,
      decDegrees,
      toleranceArcsec: file.instrument?.positionToleranceArcsec ?? POSITION_TOLERANCE_ARCSEC,
      where: file.originalName,
    })),
  );
  if (wanted.length === 0) return [];
  const { targets, register } = await placeTargets(entries[0].file.programmeId, wanted, transaction);
  const isOff = wanted.map((place) => isOffList(place, place.toleranceArcsec, register));
  const listed = isOff.includes(true) ? await listedTargets(entries[0].file.programmeId, transaction) : null;
  return targets.map(({ id }, i) => {
    const { toleranceArcsec, where, ...place } = wanted[i];
    return { targetId: id, positionDoubt: isOff[i] ? positionDoubt(place, toleranceArcsec, listed!, where) : null };
  });
}

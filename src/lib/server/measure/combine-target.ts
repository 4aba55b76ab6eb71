import { createHash } from 'node:crypto';
import { Readable } from 'node:stream';
import { Refusal } from '$lib/domain/refusal';
import { readSpectra } from '$lib/formats/read-spectra';
import { writeSpectrumFits } from '$lib/formats/write-spectrum';
import { combineSpectra, type CombinedSpectrum } from '$lib/science/frames/combine-spectra';
import { toSpectrum } from '$lib/science/frames/to-spectrum';
import { recordEvent } from '../audit/record-event';
import { permit, type Actor } from '../auth/permissions';
import { config } from '../config/config';
import { inTransaction } from '../database/in-transaction';
import { hasCombination, independentParts, insertCombination, type PartRow } from '../database/queries/combinations';
import { addFilesToNight } from '../database/queries/nights';
import { findTarget, type TargetRow } from '../database/queries/target-page';
import { nudge } from '../queue/nudge';
import { wishFor } from '../queue/outbox';
import { objects } from '../storage/storage';

/** Part of a combination's origin: raised when combining comes out otherwise. */
const RECIPE = 'combination 1';

/**
 * Combines the spectra of a target that share no photons into one, weighted by inverse variance, which is then measured
 * and judged like any other and never counted as a repeat. The same parts are combined once.
 */
export async function combineTarget(
  actor: Actor | null,
  targetId: string,
): Promise<{ parts: number; notes: string[] }> {
  const target = await findTarget(targetId);
  if (!target) throw new Refusal('not-found', 'There is no such target, or it belongs to a programme you are not in.');
  const { programmeId } = target;
  const { userId } = permit(actor, 'target.combine', programmeId);
  const parts = await independentParts(target.id);
  if (parts.length < 2) {
    throw new Refusal(
      'conflict',
      `${target.name} has no two spectra that share no photons.`,
      'Point at it again first.',
    );
  }
  const ids = parts.map(({ id }) => id).sort();
  const origin = createHash('sha256')
    .update([RECIPE, ...ids].join(' '))
    .digest('hex');
  const known = () =>
    new Refusal('conflict', 'These spectra are combined already.', 'It stands among the spectra below.');
  if (await hasCombination(programmeId, origin)) throw known();
  const combined = await combine(parts);
  const notes = notesOn(combined, parts);
  const { sha256, sizeBytes } = await objects().put(
    Readable.from([write(combined, target, parts)]),
    config().MAX_FILE_BYTES,
  );
  const nightId = parts
    .map((part) => part.nightId)
    .sort()
    .at(-1)!;
  await inTransaction(async (transaction) => {
    if (await hasCombination(programmeId, origin, transaction)) throw known();
    const night = { id: nightId, programmeId, instrumentId: null };
    const name = `${target.name} combined of ${parts.length}.fits`.slice(-255);
    const [file] = await addFilesToNight(night, [{ name, sha256, sizeBytes }], transaction);
    const row = { fileId: file.id, programmeId, targetId: target.id, origin, parts: ids, notes, createdBy: userId };
    await insertCombination(row, transaction);
    await wishFor('ingest', [{ jobId: `ingest-${file.id}-1`, payload: { fileIds: [file.id] } }], transaction);
    const subject = `target:${target.id}`;
    await recordEvent({ userId, action: 'target.combine', subject, detail: { parts: ids.length } }, transaction);
  });
  nudge('outbox');
  return { parts: parts.length, notes };
}

async function combine(parts: readonly PartRow[]): Promise<CombinedSpectrum> {
  const spectra = [];
  for (const { sha256, originalName, extension, rowIndex, instrument } of parts) {
    const isAsked = (hdu: number, row: number) => hdu === extension && row === rowIndex;
    const bytes = await objects().read(sha256);
    const raw = readSpectra(bytes, originalName, instrument ?? undefined, isAsked).spectra.find((found) =>
      isAsked(found.extension, found.row),
    );
    if (!raw)
      throw new Refusal('unavailable', `${originalName} no longer gives its spectrum.`, 'Tell an administrator.');
    const spectrum = toSpectrum(raw, instrument ?? undefined);
    if (!spectrum.varianceKnown) {
      throw new Refusal(
        'conflict',
        `${originalName} gives no errors, so it cannot be weighted.`,
        'Hand it in with errors.',
      );
    }
    spectra.push(spectrum);
  }
  try {
    return combineSpectra(spectra);
  } catch (error) {
    if (!(error instanceof RangeError)) throw error;
    throw new Refusal('conflict', `They cannot be combined: ${error.message}.`, 'Hand them in in one unit.');
  }
}

function notesOn({ neighbourCorrelation, clipped, otherLevel }: CombinedSpectrum, parts: readonly PartRow[]): string[] {
  const named = (part: number) => parts[part].originalName;
  const notes = [
    `Neighbouring pixels are correlated by ${neighbourCorrelation.toFixed(2)}: errors of features wider than a pixel are larger than single pixels say; the engine measures by how much.`,
  ];
  const struck = clipped.flatMap((count, part) => (count ? [`${count} of ${named(part)}`] : []));
  if (struck.length) notes.push(`Left out as outliers: ${struck.join(', ')}.`);
  if (otherLevel.length) {
    notes.push(
      `The flux level of ${otherLevel.map(named).join(', ')} differs from the others, so nothing was left out.`,
    );
  }
  return notes;
}

function write(combined: CombinedSpectrum, target: TargetRow, parts: readonly PartRow[]): Uint8Array {
  const { wavelength, flux, variance, lsfSigma, fluxUnit, neighbourCorrelation } = combined;
  const seconds = parts.map(({ exposureSeconds }) => exposureSeconds);
  const isGood = (k: number) => Number.isFinite(variance[k]) && Number.isFinite(flux[k]);
  const ascii = target.name.replace(/[\u2010-\u2015\u2212]/g, '-').replace(/[^\x20-\x7e]/g, '?');
  return writeSpectrumFits({
    name: ascii,
    wavelength,
    medium: 'vacuum',
    specsys: 'BARYCENT',
    flux: flux.map((value, k) => (isGood(k) ? value : 0)),
    error: variance.map((value, k) => (isGood(k) ? Math.sqrt(value) : 0)),
    mask: flux.map((_, k) => (isGood(k) ? 0 : 1)),
    lsfSigmaAngstrom: fillEnds(lsfSigma),
    fluxUnit,
    raDegrees: target.raDegrees,
    decDegrees: target.decDegrees,
    dateObs: null,
    exposureSeconds: seconds.every((value) => value !== null) ? seconds.reduce((sum, value) => sum + value!, 0) : null,
    observatoryMetres: null,
    cards: {
      NCOMBINE: parts.length,
      PIXCORR: Number(neighbourCorrelation.toFixed(4)),
      COMMENT: 'Combined by inverse variance; PIXCORR: correlation of neighbouring pixels.',
    },
  });
}

/** Values where there are none, from the nearest pixel that has one. */
function fillEnds(values: Float64Array): Float64Array {
  const filled = values.slice();
  for (let k = 1; k < filled.length; k++) if (!Number.isFinite(filled[k])) filled[k] = filled[k - 1];
  for (let k = filled.length - 2; k >= 0; k--) if (!Number.isFinite(filled[k])) filled[k] = filled[k + 1];
  return filled;
}

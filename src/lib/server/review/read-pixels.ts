import { encodeReviewSpectrum } from '$lib/domain/review-spectrum';
import { Refusal } from '$lib/domain/refusal';
import { readSpectra } from '$lib/formats/read-spectra';
import { toSpectrum } from '$lib/science/frames/to-spectrum';
import { estimateContinuum } from '$lib/science/measure/estimate-continuum';
import type { Actor } from '../auth/permissions';
import { findReviewed } from '../database/queries/reviewed-spectrum';
import { objects } from '../storage/storage';
import { readSpectrum } from './read-spectrum';

/** The spectrum as the engine saw it, made again from the stored bytes, packed for the browser's plots. */
export async function readPixels(actor: Actor | null, spectrumId: string): Promise<ArrayBuffer> {
  const { spectrum: head } = await readSpectrum(actor, spectrumId);
  const found = await findReviewed(spectrumId);
  const instrument = found?.instrument ?? undefined;
  const bytes = await objects().read(found!.sha256);
  const { spectra } = readSpectra(bytes, found!.originalName, instrument);
  const raw = spectra.find(({ extension, row }) => extension === found!.extension && row === found!.rowIndex);
  if (!raw)
    throw new Refusal('unavailable', 'The stored file no longer gives this spectrum.', 'Tell an administrator.');
  const spectrum = toSpectrum(raw, instrument);
  const { wavelength, flux, sky, lsfSigma, observerFactor, fluxUnit, variance } = spectrum;
  const error = variance.map((value) => (Number.isFinite(value) && value > 0 ? Math.sqrt(value) : NaN));
  const { programmeName: programme, instrumentName, ...labels } = head;
  const continuum = estimateContinuum(spectrum);
  const pixels = { wavelength, flux, error, sky, continuum, lsfSigma, observerFactor, fluxUnit };
  return encodeReviewSpectrum({ ...labels, ...pixels, programme, instrument: instrumentName });
}

import { encodeReviewSpectrum } from '$lib/domain/review-spectrum';
import { Refusal } from '$lib/domain/refusal';
import { readSpectra } from '$lib/formats/read-spectra';
import { toSpectrum } from '$lib/science/frames/to-spectrum';
import { estimateContinuum } from '$lib/science/measure/estimate-continuum';
import { permit, type Actor } from '../auth/permissions';
import { objects } from '../storage/storage';
import { findMeasured, headOf } from './read-spectrum';

/** The spectrum as the engine saw it, made again from the stored bytes, packed for the browser's plots. */
export async function readPixels(actor: Actor | null, spectrumId: string): Promise<ArrayBuffer> {
  const found = await findMeasured(spectrumId);
  const reader = permit(actor, 'spectrum.read', found.programmeId);
  const instrument = found.instrument ?? undefined;
  const bytes = await objects().read(found.sha256);
  const isAsked = (extension: number, row: number) => extension === found.extension && row === found.rowIndex;
  const { spectra } = readSpectra(bytes, found.originalName, instrument, isAsked);
  const raw = spectra.find(({ extension, row }) => isAsked(extension, row));
  if (!raw)
    throw new Refusal('unavailable', 'The stored file no longer gives this spectrum.', 'Tell an administrator.');
  const spectrum = toSpectrum(raw, instrument);
  const { wavelength, flux, sky, lsfSigma, observerFactor, fluxUnit, variance } = spectrum;
  const error = variance.map((value) => (Number.isFinite(value) && value > 0 ? Math.sqrt(value) : NaN));
  const { programmeName: programme, instrumentName, hidden: _, ...labels } = await headOf(found, reader);
  const continuum = estimateContinuum(spectrum);
  const pixels = { wavelength, flux, error, sky, continuum, lsfSigma, observerFactor, fluxUnit };
  return encodeReviewSpectrum({ ...labels, ...pixels, programme, instrument: instrumentName });
}

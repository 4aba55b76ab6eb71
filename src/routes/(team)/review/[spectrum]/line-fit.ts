import type { FittedLine } from '$lib/charts/expected-line';
import type { Mask } from '$lib/domain/mask';
import type { ReviewSpectrum } from '$lib/domain/review-spectrum';
import { pixelRange } from '$lib/charts/layout/pixel-edges';
import { SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';
import { fitAtRedshift } from '$lib/science/measure/fit-at-redshift';
import { snapRedshift } from '$lib/science/measure/snap-redshift';
import { errorFromGain } from './error-from-gain';

/** How far from where it stands a redshift snaps, km/s. */
const SNAP_KMS = 600;

/** Fits the listed lines of one spectrum at any redshift. */
export interface LineFitter {
  /** @param fwhmKms intrinsic width of the lines, held */
  at(redshift: number, fwhmKms: number): { lines: FittedLine[]; model: Float64Array; continuum: Float64Array };
  /** The nearest significant maximum within 600 km/s, with its 1-sigma error; null error where no line is seen there. */
  snap(redshift: number, fwhmKms: number): { redshift: number; redshiftError: number | null };
}

/** The engine's own fit at a held redshift, on the pixels that the plots show, less those that a person masked. */
export function lineFitter(spectrum: ReviewSpectrum, masks: readonly Mask[] = []): LineFitter {
  const variance = spectrum.error.map((sigma) => (sigma > 0 ? sigma * sigma : Infinity));
  for (const { from, to } of masks) variance.fill(Infinity, ...pixelRange(spectrum.wavelength, from, to));
  const { wavelength, flux, continuum, lsfSigma } = spectrum;
  const input = { wavelength, flux, variance, continuum, lsfSigma };
  return {
    at(redshift, fwhmKms) {
      const { lines, ...curves } = fitAtRedshift(input, redshift, { fwhmKms });
      return { lines: lines.map((fit) => ({ ...fit, line: fit.line.name })), ...curves };
    },
    snap(redshift, fwhmKms) {
      const best = snapRedshift(input, redshift, SNAP_KMS);
      const gainAt = (kms: number) =>
        fitAtRedshift(input, (1 + best) * (1 + kms / SPEED_OF_LIGHT_KMS) - 1, { fwhmKms }).gain;
      const errorKms = errorFromGain(gainAt, fwhmKms / 4);
      return { redshift: best, redshiftError: errorKms && ((1 + best) * errorKms) / SPEED_OF_LIGHT_KMS };
    },
  };
}

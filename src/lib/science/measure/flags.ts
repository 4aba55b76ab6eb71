import { MASK, type Spectrum } from '$lib/domain/spectrum';
import type { Flag } from '$lib/domain/flag';
import type { Feature } from './features';
import type { PreparedSpectrum } from './prepare';

/** What flags are decided from. */
export interface FlagInput {
  spectrum: Spectrum;
  prepared: PreparedSpectrum;
  features: readonly Feature[];
  /** Features that the answer's lines explain. */
  explained: readonly number[];
  noiseFactor: number;
  broad: boolean;
  star: boolean;
  secondRedshift: number | null;
  /** Signal-to-noise of the answer's best line, 0 without an answer. */
  bestSignalToNoise: number;
  /** Whether the answer's best line lies within 3 widths of an end or gap. */
  nearEdge: boolean;
  linesBlended: boolean;
}

/** Flags of a measurement, in the order of the list of flags. */
export function flagsOf(input: FlagInput): Flag[] {
  const { spectrum, prepared, features, explained } = input;
  const { working } = prepared;
  const flags: Flag[] = [];
  const used = explained.map((index) => features[index]);
  if (used.some((feature) => feature.nearSky)) flags.push('sky residual');
  if (prepared.cosmicRayPixels > 0) flags.push('cosmic ray');
  if (input.linesBlended) flags.push('blend');
  if (spectrum.wavelengthDoubt) flags.push('wavelength doubt');
  if (input.bestSignalToNoise < 5) flags.push('low signal');
  if (input.nearEdge) flags.push('edge of range');
  if (input.noiseFactor > 1.25) flags.push('noise underestimated');
  if (input.secondRedshift !== null) flags.push('two redshifts');
  if (input.broad) flags.push('wide emission');
  if (input.star) flags.push('not extragalactic');
  let bad = 0;
  for (let i = 0; i < working.count; i++) {
    if (!(working.weight[i] > 0) && (working.mask[i] & MASK.cosmicRay) === 0) bad++;
  }
  if (bad > 0.1 * working.count) flags.push('bad pixels');
  return flags;
}

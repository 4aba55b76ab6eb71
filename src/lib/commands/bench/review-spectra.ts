import { writeSpectrumImage } from '$lib/formats/write-spectrum';
import { drawRecipe } from '$lib/science/simulate/draw-recipe';
import { simulateSpectrum } from '$lib/science/simulate/simulate-spectrum';
import type { SpectrumClass } from '$lib/science/simulate/recipe';
import { DEMO_SITE } from '$lib/science/simulate/demo-observe';
import { spectrumSeed } from './plan-spectra';

export const REVIEW_PIXELS = 10_000;
const [START, END] = [3600, 10_000];
const MIX: readonly SpectrumClass[] = ['star-forming', 'active nucleus', 'quasar', 'faint lines', 'empty sky'];

/** FITS files of one spectrum each, 10,000 pixels from 3,600 to 10,000 Å with a sky, the same for every seed. */
export function reviewFiles(count: number, seed: number): { name: string; bytes: Uint8Array }[] {
  return Array.from({ length: count }, (_, i) => {
    const recipe = drawRecipe(MIX[i % MIX.length], spectrumSeed(seed, i));
    const pixelsPerFwhm = 3;
    const resolvingPower = (0.5 * (START + END) * REVIEW_PIXELS) / ((END - START) * pixelsPerFwhm);
    recipe.arms = [{ start: START, end: END, axis: 'linear', resolvingPower, constantFwhm: true, pixelsPerFwhm }];
    recipe.noise.resampled = false;
    const { spectrum } = simulateSpectrum(recipe, seed + i);
    const name = `bench-${String(i + 1).padStart(3, '0')}`;
    const bytes = writeSpectrumImage({
      name,
      wavelength: spectrum.wavelength,
      medium: 'vacuum',
      specsys: 'BARYCENT',
      flux: spectrum.flux,
      error: spectrum.variance.map((value) => (Number.isFinite(value) ? Math.sqrt(value) : NaN)),
      fluxUnit: spectrum.fluxUnit,
      sky: spectrum.sky,
      raDegrees: 60 + i / 10,
      decDegrees: DEMO_SITE.latitudeDegrees,
      dateObs: '2026-09-20T04:00:00',
      exposureSeconds: 900,
      observatoryMetres: null,
    });
    return { name: `${name}.fits`, bytes };
  });
}

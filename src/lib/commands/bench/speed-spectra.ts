import type { Spectrum } from '$lib/domain/spectrum';
import { drawRecipe } from '$lib/science/simulate/draw-recipe';
import { simulateSpectrum } from '$lib/science/simulate/simulate-spectrum';
import type { SpectrumClass } from '$lib/science/simulate/recipe';
import { spectrumSeed } from './plan-spectra';

const MIX: readonly SpectrumClass[] = [
  'star-forming',
  'star-forming',
  'active nucleus',
  'quasar',
  'lyman-alpha emitter',
  'passive',
  'faint lines',
  'empty sky',
];

/** Spectra of exactly 4,000 pixels from 3,800 to 9,800 Å, of mixed class, the same for every seed. */
export function speedSpectra(count: number, seed: number): Spectrum[] {
  return Array.from({ length: count }, (_, i) => {
    const recipe = drawRecipe(MIX[i % MIX.length], spectrumSeed(seed, i));
    const pixelsPerFwhm = 3;
    const [start, end] = [3800, 9800];
    recipe.arms = [
      {
        start,
        end,
        axis: 'linear',
        resolvingPower: (0.5 * (start + end) * 4000) / ((end - start) * pixelsPerFwhm),
        constantFwhm: true,
        pixelsPerFwhm,
      },
    ];
    recipe.noise.resampled = false;
    return simulateSpectrum(recipe, seed + i).spectrum;
  });
}

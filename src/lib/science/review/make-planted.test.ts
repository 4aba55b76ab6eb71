import { describe, expect, it } from 'vitest';
import { drawRecipe } from '$lib/science/simulate/draw-recipe';
import { simulateSpectrum } from '$lib/science/simulate/simulate-spectrum';
import { measureSpectrum } from '$lib/science/measure/measure-spectrum';
import { makePlanted } from './make-planted';
import { velocityBetweenKms } from './verdicts-agree';

function donor(seed: number) {
  const recipe = drawRecipe('star-forming', seed);
  recipe.arms = [
    { start: 3700, end: 9800, axis: 'linear', resolvingPower: 2000, constantFwhm: true, pixelsPerFwhm: 2.3 },
  ];
  recipe.noise = { ...recipe.noise, level: 0.06, skyLines: 30, resampled: false, declaredErrorFactor: 1, lsfError: 1 };
  const { spectrum, truth } = simulateSpectrum(recipe, seed);
  return { spectrum, truth, measurement: measureSpectrum(spectrum) };
}

describe('makePlanted', () => {
  it('gives the same for the same seed, and no copy of its donor', () => {
    const { spectrum, measurement } = donor(4);
    const planted = makePlanted(spectrum, measurement, 11);
    expect(makePlanted(spectrum, measurement, 11)).toEqual(planted);
    expect(makePlanted(spectrum, measurement, 12).flux).not.toEqual(planted.flux);
    expect(planted.flux).toHaveLength(spectrum.flux.length);
    expect(planted.flux.every(Number.isFinite)).toBe(true);
  });

  it('hides the donor’s own object and shows the one put in: of those the engine calls secure, all are at the known redshift', () => {
    const found = { secure: 0, right: 0, own: 0, empty: 0 };
    for (let seed = 1; seed <= 14; seed++) {
      const { spectrum, truth, measurement } = donor(seed % 4);
      const { flux, redshift } = makePlanted(spectrum, measurement, 1000 + seed);
      const answer = measureSpectrum({ ...spectrum, flux });
      if (redshift === null) found.empty++;
      if (answer.confidence !== 'secure' || answer.redshift === null) continue;
      found.secure++;
      // An object put in at its donor's redshift by chance is right all the same.
      if (redshift !== null && velocityBetweenKms(answer.redshift, redshift) < 1000) found.right++;
      else if (truth.redshift !== null && velocityBetweenKms(answer.redshift, truth.redshift) < 1000) found.own++;
    }
    expect(found.secure).toBeGreaterThan(4);
    expect(found.right).toBe(found.secure);
    expect(found.own).toBe(0);
    expect(found.empty).toBeGreaterThan(0);
  });
});

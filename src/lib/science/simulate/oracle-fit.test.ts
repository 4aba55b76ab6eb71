import { describe, expect, it } from 'vitest';
import { SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';
import { layOutPixels } from './detector-grid';
import { drawRecipe } from './draw-recipe';
import { placeObject } from './object-on-pixels';
import { simulateSpectrum } from './simulate-spectrum';

/** Flux and error of one line of known profile over a straight continuum, by weighted least squares on three terms. */
function fitKnown(profile: { first: number; value: Float64Array }, flux: Float64Array, variance: Float64Array) {
  const normal = [0, 1, 2].map(() => [0, 0, 0]);
  const right = [0, 0, 0];
  const n = profile.value.length;
  for (let k = 0; k < n; k++) {
    const i = profile.first + k;
    if (!Number.isFinite(variance[i])) return null;
    const row = [profile.value[k], 1, (2 * k) / n - 1];
    for (let a = 0; a < 3; a++) {
      right[a] += (row[a] * flux[i]) / variance[i];
      for (let b = 0; b < 3; b++) normal[a][b] += (row[a] * row[b]) / variance[i];
    }
  }
  const [[a, b, c], [, e, f], [, , g]] = normal;
  const determinant = a * (e * g - f * f) - b * (b * g - f * c) + c * (b * f - e * c);
  const inverse = [(e * g - f * f) / determinant, (c * f - b * g) / determinant, (b * f - c * e) / determinant];
  return { flux: inverse[0] * right[0] + inverse[1] * right[1] + inverse[2] * right[2], error: Math.sqrt(inverse[0]) };
}

describe('a fit that knows every profile', { timeout: 60_000 }, () => {
  it('gets the fluxes of the truth back, without bias and with the errors that the variance promises', () => {
    const pulls: number[] = [];
    for (let seed = 1; seed <= 90; seed++) {
      const recipe = drawRecipe('precision', seed);
      if (recipe.arms.length > 1) continue;
      const { spectrum, truth } = simulateSpectrum(recipe, seed);
      const grid = layOutPixels(recipe.arms, 1 + recipe.barycentricKms / SPEED_OF_LIGHT_KMS, 1);
      for (const { line, profile } of placeObject(recipe.objects[0], grid).lines) {
        const put = truth.lines.find((l) => l.line === line.line);
        if (!put) continue;
        const alone = truth.lines.every(
          (l) =>
            l === put ||
            l.flux < put.flux / 500 ||
            Math.abs(l.wavelengthObserved - put.wavelengthObserved) > 0.012 * put.wavelengthObserved,
        );
        if (!alone || put.signalToNoise < 3 || put.coverage < 0.999) continue;
        const fit = fitKnown(profile, spectrum.flux, spectrum.variance);
        if (fit) pulls.push((fit.flux - put.flux) / fit.error);
      }
    }
    const mean = pulls.reduce((sum, p) => sum + p, 0) / pulls.length;
    const spread = Math.sqrt(pulls.reduce((sum, p) => sum + (p - mean) ** 2, 0) / pulls.length);
    expect(pulls.length).toBeGreaterThan(60);
    expect(Math.abs(mean)).toBeLessThan(3.5 / Math.sqrt(pulls.length));
    expect(Math.abs(spread - 1)).toBeLessThan(3.5 / Math.sqrt(2 * pulls.length));
  });
});

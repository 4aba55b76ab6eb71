import { describe, expect, it } from 'vitest';
import { drawRecipe } from './draw-recipe';
import { SPECTRUM_CLASSES, type SpectrumClass } from './recipe';
import { simulateSpectrum } from './simulate-spectrum';

describe('simulateSpectrum', { timeout: 30_000 }, () => {
  it.each(SPECTRUM_CLASSES)(
    'makes whole %s spectra: increasing wavelengths, finite flux, positive variance',
    (name) => {
      for (let seed = 1; seed <= 6; seed++) {
        const { spectrum } = simulateSpectrum(drawRecipe(name, seed), seed);
        const { wavelength, edges, flux, variance } = spectrum;
        expect(edges.length).toBe(flux.length + 1);
        for (let i = 0; i < flux.length; i++) {
          if (!(edges[i] < wavelength[i] && wavelength[i] <= edges[i + 1]))
            throw new Error(`${name} ${seed} pixel ${i}`);
          if (!Number.isFinite(flux[i]) || !(variance[i] > 0)) throw new Error(`${name} ${seed} value ${i}`);
        }
      }
    },
  );

  it('gives the same bytes for the same recipe and seed, others for another seed', () => {
    const recipe = drawRecipe('star-forming', 5);
    const first = simulateSpectrum(recipe, 9).spectrum.flux;
    expect(simulateSpectrum(recipe, 9).spectrum.flux).toEqual(first);
    expect(simulateSpectrum(recipe, 10).spectrum.flux).not.toEqual(first);
  });

  it('declares the variance that its noise has', () => {
    const recipe = drawRecipe('pure noise', 11);
    const { spectrum } = simulateSpectrum(recipe, 1);
    const pulls = spectrum.flux.map((value, i) => value / Math.sqrt(spectrum.variance[i]));
    const finite = pulls.filter(Number.isFinite);
    const variance = finite.reduce((sum, p) => sum + p * p, 0) / finite.length;
    expect(Math.abs(variance - 1)).toBeLessThan(5 * Math.sqrt(2 / finite.length));
  });

  it('correlates neighbours by about a quarter once resampled, with two thirds of the variance', () => {
    const recipe = drawRecipe('pure noise', 12);
    recipe.noise.resampled = true;
    recipe.arms = [
      { start: 5000, end: 9000, axis: 'linear', resolvingPower: 3000, constantFwhm: true, pixelsPerFwhm: 3 },
    ];
    const { flux, variance } = simulateSpectrum(recipe, 2).spectrum;
    let product = 0;
    let square = 0;
    let declared = 0;
    for (let i = 0; i + 1 < flux.length; i++) {
      product += flux[i] * flux[i + 1];
      square += flux[i] * flux[i];
      declared += variance[i];
    }
    expect(product / square).toBeGreaterThan(0.17);
    expect(product / square).toBeLessThan(0.33);
    expect(square / declared).toBeGreaterThan(0.93);
    expect(square / declared).toBeLessThan(1.07);
  });

  it('scales the best line to the signal-to-noise ratio asked for', () => {
    for (let seed = 1; seed <= 8; seed++) {
      const recipe = drawRecipe('precision', seed);
      const { truth } = simulateSpectrum(recipe, seed);
      expect(truth.bestSignalToNoise / recipe.signalToNoise).toBeGreaterThan(0.9);
      expect(truth.bestSignalToNoise / recipe.signalToNoise).toBeLessThan(1.12);
    }
  });

  it('recovers the flux of a line within its noise by the true profile', () => {
    // the strongest line of a spectrum of very high signal, continuum taken from either side
    const recipe = drawRecipe('precision', 4);
    recipe.objects[0].equivalentWidthRest = 1e6;
    recipe.signalToNoise = 3000;
    const { spectrum, truth } = simulateSpectrum(recipe, 3);
    const alone = truth.lines.filter((l) =>
      truth.lines.every((o) => o === l || Math.abs(o.wavelengthObserved - l.wavelengthObserved) > 60),
    );
    const line = alone.reduce((a, b) => (b.signalToNoise > a.signalToNoise ? b : a));
    let sum = 0;
    spectrum.flux.forEach((value, i) => {
      if (Math.abs(spectrum.wavelength[i] - line.wavelengthObserved) < 25)
        sum += value * (spectrum.edges[i + 1] - spectrum.edges[i]);
    });
    expect(line.signalToNoise).toBeGreaterThan(100);
    expect(sum / line.flux).toBeGreaterThan(0.95);
    expect(sum / line.flux).toBeLessThan(1.05);
  });
});

describe('truth', { timeout: 30_000 }, () => {
  const truths = (name: SpectrumClass, count: number) =>
    Array.from({ length: count }, (_, i) => simulateSpectrum(drawRecipe(name, i + 1), i + 1).truth);

  it('has no redshift for sky, noise, stars and featureless continua', () => {
    for (const name of ['empty sky', 'pure noise', 'star', 'featureless continuum'] as const) {
      for (const truth of truths(name, 4)) expect([truth.redshift, truth.detectable]).toEqual([null, false]);
    }
  });

  it('puts the Lyman-alpha peak redward of the systemic redshift, within 700 km/s', () => {
    for (const { redshift, redshiftSystemic } of truths('lyman-alpha emitter', 12)) {
      const offset = (299792.458 * (redshift! - redshiftSystemic!)) / (1 + redshiftSystemic!);
      expect(offset).toBeGreaterThan(-60);
      expect(offset).toBeLessThan(700);
    }
  });

  it('gives a bound on the redshift error for precision spectra only', () => {
    for (const truth of truths('precision', 4)) expect(truth.redshiftBound).toBeGreaterThan(1e-7);
    for (const truth of truths('star-forming', 4)) expect(truth.redshiftBound).toBeNull();
  });

  it('knows both redshifts of a blend', () => {
    for (const truth of truths('two redshifts', 4)) {
      expect(truth.secondRedshift).not.toBeNull();
      expect(new Set(truth.lines.map((l) => l.object)).size).toBeGreaterThan(0);
    }
  });

  it('leaves one feature above 4 in most single-line spectra', () => {
    const lone = truths('single line', 40).filter((t) => t.featuresOverFour === 1);
    expect(lone.length).toBeGreaterThan(28);
  });
});

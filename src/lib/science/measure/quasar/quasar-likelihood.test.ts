import { describe, expect, it } from 'vitest';
import { drawRecipe } from '../../simulate/draw-recipe';
import { simulateSpectrum } from '../../simulate/simulate-spectrum';
import { prepareSpectrum } from '../prepare';
import { coarsen } from './coarse-spectrum';
import { quasarLikelihood } from './quasar-likelihood';
import { wholeRedshift } from './whole-redshift';

/** Likelihood of a simulated spectrum of one class. */
function likelihoodOf(spectrumClass: 'quasar' | 'pure noise', seed: number) {
  const { spectrum, truth } = simulateSpectrum(drawRecipe(spectrumClass, seed), seed);
  return { weigh: quasarLikelihood(coarsen(prepareSpectrum(spectrum).guarded, 1)), truth };
}

/** Best redshift on a grid of 1,200 km/s. */
function bestOnGrid(weigh: ReturnType<typeof quasarLikelihood>) {
  let best = weigh(0, 1800);
  for (let logScale = 0; logScale < Math.log(8); logScale += 0.004) {
    const fit = weigh(logScale, 1800);
    if (fit.logEvidence > best.logEvidence) best = fit;
  }
  return best;
}

describe('quasarLikelihood', () => {
  it.each([700000, 700003, 700009, 700016])('is highest at the redshift of quasar %d', (seed) => {
    const { weigh, truth } = likelihoodOf('quasar', seed);
    const best = bestOnGrid(weigh);
    expect(Math.abs(best.logScale - Math.log1p(truth.redshift!))).toBeLessThan(0.01);
    expect(best.logEvidence).toBeGreaterThan(50);
  });

  it('finds no quasar in noise', () => {
    expect(bestOnGrid(likelihoodOf('pure noise', 11).weigh).logEvidence).toBeLessThan(10);
  });

  it('does not depend on the order of questions', () => {
    const { weigh } = likelihoodOf('quasar', 700002);
    const first = weigh(1.6, 1800).logEvidence;
    weigh(0.3, 1000);
    weigh(1.4, 3200);
    expect(weigh(1.6, 1800).logEvidence).toBe(first);
  });

  it('finds the redshift again from 1,500 km/s beside it', () => {
    const { weigh, truth } = likelihoodOf('quasar', 700003);
    const logScale = wholeRedshift(weigh, Math.log1p(truth.redshift!) + 0.005);
    expect(Math.abs(logScale - Math.log1p(truth.redshift!))).toBeLessThan(0.0015);
  });
});

import { describe, expect, it } from 'vitest';
import { estimateContinuum } from './estimate-continuum';
import { fitAtRedshift } from './fit-at-redshift';
import { snapRedshift } from './snap-redshift';
import { GALAXY_LINES, testSpectrum } from './test-spectrum';

const spectrum = testSpectrum({ redshift: 0.2, lines: GALAXY_LINES, seed: 3 });
const input = { ...spectrum, continuum: estimateContinuum(spectrum) };

describe('fitAtRedshift', () => {
  it('gives H-alpha its flux within errors and draws a model through the spectrum', () => {
    const result = fitAtRedshift(input, 0.2);
    const alpha = result.lines.find((entry) => entry.line.name === 'H-alpha 6565')!;
    expect(Math.abs(alpha.flux - 100)).toBeLessThan(4 * alpha.fluxError);
    let chiSquare = 0;
    for (let i = 0; i < spectrum.flux.length; i++) chiSquare += (spectrum.flux[i] - result.model[i]) ** 2;
    expect(chiSquare / spectrum.flux.length).toBeLessThan(1.15);
  });

  it('counts a broad line once where the given continuum has followed it', () => {
    const broad = testSpectrum({ redshift: 0.2, lines: { 'H-alpha 6565': 900 }, sigmaKms: 1700, seed: 5 });
    const given = estimateContinuum(broad);
    const centre = broad.wavelength.findIndex((place) => place > 6564.6 * 1.2);
    expect(given[centre]).toBeGreaterThan(6);
    const { model, continuum } = fitAtRedshift({ ...broad, continuum: given }, 0.2, { fwhmKms: 4000 });
    expect(continuum[centre]).toBeLessThan(given[centre] - 0.5);
    let chiSquare = 0;
    for (let i = centre - 60; i < centre + 60; i++) chiSquare += (broad.flux[i] - model[i]) ** 2;
    expect(chiSquare / 120).toBeLessThan(1.4);
  });

  it('gains more at the true redshift than 500 km/s off', () => {
    expect(fitAtRedshift(input, 0.2).gain).toBeGreaterThan(fitAtRedshift(input, 0.202, { fwhmKms: 190 }).gain + 100);
  });

  it('returns no lines where none is covered', () => {
    expect(fitAtRedshift({ ...input, variance: spectrum.variance.map(() => Infinity) }, 0.2).lines).toEqual([]);
  });
});

describe('snapRedshift', () => {
  it('goes to the nearest maximum of the likelihood', () => {
    expect(Math.abs(snapRedshift(input, 0.2008, 400) - 0.2)).toBeLessThan(1e-4);
  });

  it('goes to the nearer of two objects, not to the brighter', () => {
    const apart = 1.2 * (500 / 299792.458);
    const bright = testSpectrum({ redshift: 0.2 + apart, lines: GALAXY_LINES, noise: 0, continuum: 0 });
    const fainter = Object.fromEntries(Object.entries(GALAXY_LINES).map(([name, flux]) => [name, 0.85 * flux]));
    const faint = testSpectrum({ redshift: 0.2, lines: fainter, seed: 7 });
    const both = { ...faint, flux: faint.flux.map((value, i) => value + bright.flux[i]) };
    const two = { ...both, continuum: estimateContinuum(both) };
    expect(Math.abs(snapRedshift(two, 0.2 + 0.2 * apart, 600) - 0.2)).toBeLessThan(2e-4);
    expect(Math.abs(snapRedshift(two, 0.2 + 0.8 * apart, 600) - 0.2 - apart)).toBeLessThan(2e-4);
  });

  it('passes over maxima that are noise, or one line in the place of another', () => {
    for (const seed of [1, 2, 3, 4, 5, 6]) {
      const noisy = testSpectrum({ redshift: 0.2, lines: GALAXY_LINES, noise: 2, seed });
      const given = { ...noisy, continuum: estimateContinuum(noisy) };
      for (const kms of [-550, 550]) {
        const from = 1.2 * (1 + kms / 299792.458) - 1;
        expect(Math.abs(snapRedshift(given, from, 600) - 0.2), `seed ${seed}, ${kms} km/s`).toBeLessThan(3e-4);
      }
    }
  });

  it('takes the highest likelihood where no maximum is significant', () => {
    const weak = testSpectrum({ redshift: 0.2, lines: { 'H-alpha 6565': 11 }, seed: 3 });
    const given = { ...weak, continuum: estimateContinuum(weak) };
    const snapped = snapRedshift(given, 0.2004, 400);
    const gain = (redshift: number) => fitAtRedshift(given, redshift, { fwhmKms: 200 }).gain;
    expect(gain(snapped)).toBeGreaterThan(gain(0.2004));
  });

  it('returns the given redshift where nothing is covered', () => {
    expect(snapRedshift({ ...input, variance: spectrum.variance.map(() => Infinity) }, 0.2, 600)).toBe(0.2);
  });
});

import { describe, expect, it } from 'vitest';
import { airToVacuum } from '$lib/science/frames/air-vacuum';
import { drawRecipe } from './draw-recipe';
import { simulateSpectrum } from './simulate-spectrum';
import { invertSign, scaleFlux, toRawSpectrum } from './transform-spectrum';

const { spectrum } = simulateSpectrum(drawRecipe('star-forming', 3), 3);

describe('invertSign', () => {
  it('turns flux over and leaves the rest', () => {
    const inverted = invertSign(spectrum);
    expect(inverted.flux[100]).toBe(-spectrum.flux[100]);
    expect(inverted.variance).toBe(spectrum.variance);
  });
});

describe('scaleFlux', () => {
  it('keeps significance, and the physical flux when asked', () => {
    const scaled = scaleFlux(spectrum, 1e17, true);
    const i = spectrum.variance.findIndex(Number.isFinite);
    expect(scaled.flux[i] / Math.sqrt(scaled.variance[i])).toBeCloseTo(
      spectrum.flux[i] / Math.sqrt(spectrum.variance[i]),
      9,
    );
    expect(scaled.flux[i] * scaled.fluxScaleCgs!).toBeCloseTo(spectrum.flux[i] * spectrum.fluxScaleCgs!, 25);
    expect(scaled.fluxUnit).toMatch(/^1e-34 erg/);
  });
});

describe('toRawSpectrum', () => {
  it('says the same wavelengths in air, nanometres, reversed', () => {
    const raw = toRawSpectrum(spectrum, { medium: 'air', wavelengthUnitAngstrom: 10, reversed: true });
    const usable = spectrum.wavelength.filter((_, i) => Number.isFinite(spectrum.variance[i]));
    expect(raw.wavelength[0]).toBeGreaterThan(raw.wavelength[1]);
    expect(raw.wavelength.length).toBe(usable.length);
    expect(airToVacuum(raw.wavelength[0] * raw.wavelengthScaleAngstrom)).toBeCloseTo(usable[usable.length - 1], 4);
  });
});

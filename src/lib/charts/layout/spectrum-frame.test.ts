import { describe, expect, it } from 'vitest';
import { clampView, spectrumFrame, wavelengthFrame } from './spectrum-frame';

describe('spectrumFrame', () => {
  it('shares its wavelength axis with the level diagram', () => {
    const { left, plotWidth } = spectrumFrame(720, 450, true);
    expect(wavelengthFrame(720)).toMatchObject({ left, plotWidth });
  });
  it('gives the room of a missing sky panel to the flux', () => {
    const [withSky, without] = [spectrumFrame(720, 450, true), spectrumFrame(720, 450, false)];
    expect(without.fluxBottom).toBeGreaterThan(withSky.fluxBottom);
    expect(without.skyTop).toBe(without.skyBottom);
  });
});

describe('clampView', () => {
  it('keeps a view inside the spectrum and wide enough', () => {
    expect(clampView(3000, 4000, 3700, 9300)).toEqual({ from: 3700, to: 4700 });
    expect(clampView(9000, 9900, 3700, 9300)).toEqual({ from: 8400, to: 9300 });
    expect(clampView(6000, 6001, 3700, 9300)).toEqual({ from: 5980.5, to: 6020.5 });
    expect(clampView(0, 1e6, 3700, 9300)).toEqual({ from: 3700, to: 9300 });
  });
});

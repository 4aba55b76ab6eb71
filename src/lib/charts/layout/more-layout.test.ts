import { describe, expect, it } from 'vitest';
import { expectedLines, isSeen, linesOutside } from '../expected-line';
import { energyAboveGroundEv, energyAxis, transitionWidth } from './level-layout';
import { rungScale } from './rung-scale';
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

describe('rungScale', () => {
  const count = 60;
  const array = (value: (i: number) => number) => Float64Array.from({ length: count }, (_, i) => value(i));
  const spectrum = {
    wavelength: array((i) => i),
    flux: array((i) => (i === 30 || i === 31 || i === 32 ? 13 : 1)),
    error: array(() => 1),
    continuum: array(() => 1),
  };
  it('makes room for the peak of the line', () => {
    expect(rungScale(spectrum, [0, count], []).top).toBeCloseTo(12 * 1.2, 10);
  });
  it('leaves out what stands under a sky line', () => {
    expect(rungScale(spectrum, [0, count], [{ from: 28, to: 34 }]).top).toBe(3);
  });
  it('is -1 to 1 where no pixel is usable', () => {
    expect(rungScale({ ...spectrum, error: array(() => NaN) }, [0, count], [])).toEqual({ bottom: -1, top: 1 });
  });
});

describe('level layout', () => {
  it('puts hydrogen at 10.20 eV (n = 2) and 13.598 eV (limit) above the ground state (NIST ASD)', () => {
    expect(energyAboveGroundEv(2)).toBeCloseTo(10.199, 2);
    expect(energyAboveGroundEv(Infinity)).toBeCloseTo(13.598, 3);
    expect(energyAboveGroundEv(1)).toBe(0);
  });
  it('starts below the ground state only for Lyman lines', () => {
    expect(energyAxis(true).bottom).toBeLessThan(0);
    expect(energyAxis(false).bottom).toBeLessThan(energyAboveGroundEv(2));
  });
  it('draws strokes by signal-to-noise within limits', () => {
    expect([NaN, 0, 10, 100].map(transitionWidth)).toEqual([1.2, 1.2, 5, 9]);
  });
});

describe('expectedLines', () => {
  const fit = (line: string, wavelengthObserved: number, signalToNoise: number) => ({
    line,
    wavelengthObserved,
    flux: 1,
    fluxError: 1,
    signalToNoise,
  });
  it('joins fits to the list in order of wavelength and leaves strangers out', () => {
    const lines = expectedLines([fit('H-alpha 6565', 8602, 21), fit('[O III] 5008', 6563, 2), fit('nothing 1', 1, 1)]);
    expect(lines.map(({ label, permitted, upperLevel }) => [label, permitted, upperLevel])).toEqual([
      ['[O\u00a0III]\u00a05008', false, null],
      ['Hα\u00a06565', true, 3],
    ]);
    expect(lines.map(isSeen)).toEqual([false, true]);
  });
  it('names the lines that fall outside the range', () => {
    const outside = linesOutside(0, 3800, 9000);
    expect(outside).toContain('Lyα\u00a01216');
    expect(outside).not.toContain('Hα\u00a06565');
  });
});

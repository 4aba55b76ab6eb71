import { describe, expect, it } from 'vitest';
import type { Measurement } from './measurement';
import {
  decodeReviewSpectrum,
  encodeReviewSpectrum,
  ReviewSpectrumError,
  type ReviewSpectrum,
} from './review-spectrum';

const measurement: Measurement = {
  redshift: 0.31,
  redshiftError: 0.00003,
  redshiftErrorMeasured: 0.00003,
  redshiftSystemic: null,
  secondRedshift: null,
  probability: 0.96,
  rivals: { nothing: 0.002, star: 0.001, passive: 0.0004 },
  confidence: 'probable',
  fluxUnit: '1e-17 erg s-1 cm-2 Angstrom-1',
  candidates: [],
  lines: [],
  derived: null,
  reasons: ['Hα and [O III] stand in one column'],
  flags: [],
  noiseFactor: 1.02,
  frame: { medium: 'vacuum', specsys: 'BARYCENT', barycentricKms: 0 },
  engine: { version: '1', lineList: '1', settings: 'x' },
};

function spectrumOf(pixels: number, sky: boolean): ReviewSpectrum {
  const array = (value: (i: number) => number) => Float64Array.from({ length: pixels }, (_, i) => value(i));
  return {
    id: 'a',
    name: 'HC J0412.6\u22123120',
    why: 'the answer leaves 0.30 bit open',
    nightLabel: '2026-11-14',
    programme: 'CH-26B-017',
    instrument: 'Twin-arm spectrograph',
    exposure: '3 × 900 s',
    wavelength: array((i) => 3700.123456789 + 1.4 * i),
    flux: array((i) => 1e-17 * Math.sin(i)),
    error: array((i) => (i === 3 ? NaN : 0.25)),
    sky: sky ? array((i) => i) : null,
    continuum: array(() => 0.5),
    lsfSigma: array(() => 1.3),
    observerFactor: 1.00005,
    fluxUnit: measurement.fluxUnit,
    measurement,
  };
}

describe('encodeReviewSpectrum and decodeReviewSpectrum', () => {
  it.each([
    [7, true],
    [7, false],
    [0, true],
  ])('come back to the same spectrum of %i pixels, sky %s', (pixels, sky) => {
    const spectrum = spectrumOf(pixels, sky);
    const back = decodeReviewSpectrum(encodeReviewSpectrum(spectrum));
    expect(back.wavelength).toEqual(spectrum.wavelength);
    expect(back.flux).toEqual(Float64Array.from(spectrum.flux, Math.fround));
    expect(back.error).toEqual(spectrum.error);
    expect(back.sky).toEqual(spectrum.sky);
    expect({ ...back, flux: null }).toEqual({
      ...spectrum,
      flux: null,
      lsfSigma: Float64Array.from(spectrum.lsfSigma, Math.fround),
    });
  });

  it('spends 28 bytes a pixel and a head', () => {
    const [small, large] = [1000, 2000].map((pixels) => encodeReviewSpectrum(spectrumOf(pixels, true)).byteLength);
    expect(large - small).toBe(28_000);
  });

  it('says what is wrong with bytes that are foreign, of another layout, or cut short', () => {
    const good = encodeReviewSpectrum(spectrumOf(7, true));
    const other = good.slice(0);
    new DataView(other).setUint32(4, 9, true);
    expect(() => decodeReviewSpectrum(new ArrayBuffer(4))).toThrow('without a head');
    expect(() => decodeReviewSpectrum(new ArrayBuffer(64))).toThrow('not the pixels');
    expect(() => decodeReviewSpectrum(other)).toThrow('layout 9');
    expect(() => decodeReviewSpectrum(good.slice(0, 40))).toThrow('cut short');
    expect(() => decodeReviewSpectrum(good.slice(0, -4))).toThrow('cut short');
  });

  it('refuses a head that is not what it should be', () => {
    const broken = encodeReviewSpectrum({ ...spectrumOf(7, true), observerFactor: -1 });
    expect(() => decodeReviewSpectrum(broken)).toThrow(ReviewSpectrumError);
  });

  it('refuses arrays of different lengths', () => {
    expect(() => encodeReviewSpectrum({ ...spectrumOf(7, true), flux: new Float64Array(6) })).toThrow(
      'flux has 6 values',
    );
  });
});

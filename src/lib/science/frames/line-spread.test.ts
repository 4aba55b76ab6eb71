import { describe, expect, it } from 'vitest';
import type { Instrument } from '$lib/domain/instrument';
import type { RawSpectrum } from '$lib/domain/spectrum';
import { toSpectrum } from './to-spectrum';

const n = 200;
const angstrom = Float64Array.from({ length: n }, (_, i) => 5000 * 10 ** (2e-4 * i));

function raw(changes: Partial<RawSpectrum> = {}): RawSpectrum {
  return {
    extension: 0,
    row: 1,
    name: 'CHO 1',
    raDegrees: 187.277915,
    decDegrees: 2.052388,
    exposureSeconds: 900,
    wavelength: angstrom,
    wavelengthScaleAngstrom: 1,
    flux: Float64Array.from({ length: n }, (_, i) => 1 + Math.sin(i / 7)),
    fluxUnit: '1e-17 erg s-1 cm-2 Angstrom-1',
    variance: new Float64Array(n).fill(0.04),
    sky: null,
    bad: null,
    resolvingPower: 2000,
    lsfSigmaAngstrom: null,
    frame: {
      medium: 'vacuum',
      specsys: 'BARYCENT',
      midExposureJulianDateUtc: 2453232.9,
      observatoryMetres: [-1463998.7, -5166633.7, 3435014],
    },
    header: {},
    warnings: [],
    ...changes,
  };
}

describe('line-spread function', () => {
  it('comes from the file, then the instrument, then an assumption, and says which', () => {
    const instrument: Instrument = { name: 'spectrograph', resolvingPower: 1000 };
    const ofFile = toSpectrum(raw(), instrument);
    expect(ofFile.lsfSource).toBe('file');
    expect(ofFile.lsfSigma[0]).toBeCloseTo(angstrom[0] / 2000 / 2.3548, 4);
    const ofInstrument = toSpectrum(raw({ resolvingPower: null }), instrument);
    expect(ofInstrument.lsfSource).toBe('instrument');
    expect(ofInstrument.lsfSigma[0]).toBeCloseTo(angstrom[0] / 1000 / 2.3548, 4);
    const width = toSpectrum(raw({ resolvingPower: null }), { name: 'spectrograph', resolutionFwhmAngstrom: 4 });
    expect(width.lsfSigma[n - 1]).toBeCloseTo(4 / 2.3548, 4);
    expect(toSpectrum(raw({ resolvingPower: null })).lsfSource).toBe('assumed');
  });

  it('takes an array of the file, its holes from their neighbours', () => {
    const lsfSigmaAngstrom = Float64Array.from({ length: n }, (_, i) => (i === 9 ? Number.NaN : 1 + i / n));
    const said = toSpectrum(raw({ lsfSigmaAngstrom }));
    expect(said.lsfSource).toBe('file');
    expect(said.lsfSigma[50]).toBe(1.25);
    expect(said.lsfSigma[9]).toBeGreaterThan(1);
  });
});

describe('a table of resolutions', () => {
  it('is read by straight lines in the frame of the observatory, with its end values beyond its ends', () => {
    const instrument: Instrument = {
      name: 'spectrograph',
      resolutionTableAngstrom: [
        [5100, 2.4],
        [5200, 3.4],
      ],
    };
    const { lsfSigma, lsfSource, wavelength, observerFactor } = toSpectrum(raw({ resolvingPower: null }), instrument);
    const fwhmAt = (angstrom: number) =>
      2.3548200450309493 * lsfSigma[wavelength.findIndex((at) => at * observerFactor >= angstrom)];
    expect(lsfSource).toBe('instrument');
    expect(fwhmAt(5000)).toBeCloseTo(2.4, 10);
    expect(fwhmAt(5150)).toBeCloseTo(2.9, 1);
    expect(fwhmAt(5250)).toBeCloseTo(3.4, 10);
  });
});

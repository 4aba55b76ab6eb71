import { describe, expect, it } from 'vitest';
import { readSpectra } from './read-spectra';
import {
  writeSpectrumCsv,
  writeSpectrumEcsv,
  writeSpectrumFits,
  writeSpectrumImage,
  type WritableSpectrum,
} from './write-spectrum';

const n = 40;
const spectrum: WritableSpectrum = {
  name: "CHO 17 'blue'",
  wavelength: Float64Array.from({ length: n }, (_, i) => 4000 + 1.25 * i),
  medium: 'air',
  specsys: 'TOPOCENT',
  flux: Float64Array.from({ length: n }, (_, i) => (i === 7 ? Number.NaN : 1 + 0.1 * i)),
  error: new Float64Array(n).fill(0.25),
  fluxUnit: '1e-17 erg s-1 cm-2 Angstrom-1',
  sky: Float64Array.from({ length: n }, (_, i) => 5 + Math.sin(i)),
  mask: Uint8Array.from({ length: n }, (_, i) => (i === 3 ? 1 : 0)),
  raDegrees: 143.15951,
  decDegrees: -28.76975,
  dateObs: '2017-03-31T10:04:41.000',
  exposureSeconds: 900,
  observatoryMetres: [-4090053.34, 2496579.22, -4196270.98],
  resolvingPower: 1850.5,
  cards: { TELESCOP: 'Cape Halloran Observatory' },
};

const encoder = new TextEncoder();
const written = {
  'binary table': writeSpectrumFits(spectrum),
  image: writeSpectrumImage(spectrum),
  CSV: encoder.encode(writeSpectrumCsv(spectrum)),
  ECSV: encoder.encode(writeSpectrumEcsv(spectrum)),
};

describe.each(Object.entries(written))('a spectrum written as %s', (form, bytes) => {
  const { spectra, problems } = readSpectra(bytes, 'file');
  const [raw] = spectra;

  it('is read back whole', () => {
    expect(problems).toEqual([]);
    expect(spectra).toHaveLength(1);
    const angstrom = raw.wavelength.map((value) => value * raw.wavelengthScaleAngstrom);
    angstrom.forEach((value, i) => expect(value).toBeCloseTo(spectrum.wavelength[i], 9));
    raw.flux.forEach((value, i) => expect(value).toEqual(spectrum.flux[i]));
    raw.variance!.forEach((value) => expect(value).toBeCloseTo(0.0625, 12));
    expect(Array.from(raw.sky!)).toEqual(Array.from(spectrum.sky!));
    expect(Array.from(raw.bad!)).toEqual(Array.from(spectrum.mask!));
  });

  it('keeps name, place, time and frame', () => {
    expect(raw.name).toBe(spectrum.name);
    expect(raw.raDegrees).toBe(spectrum.raDegrees);
    expect(raw.decDegrees).toBe(spectrum.decDegrees);
    expect(raw.exposureSeconds).toBe(900);
    expect(raw.fluxUnit).toBe(spectrum.fluxUnit);
    expect(raw.resolvingPower).toBe(1850.5);
    expect(raw.frame.medium).toBe('air');
    expect(raw.frame.specsys).toBe('TOPOCENT');
    expect(raw.frame.observatoryMetres).toEqual(spectrum.observatoryMetres);
    // 10:04:41 plus 450 s on 31 March 2017
    expect(raw.frame.midExposureJulianDateUtc).toBeCloseTo(2457843.5 + (10 * 3600 + 4 * 60 + 41 + 450) / 86400, 6);
    expect(raw.header.TELESCOP).toBe('Cape Halloran Observatory');
    expect(raw.extension).toBe(form === 'binary table' ? 1 : 0);
  });
});

it('refuses a linear axis for unevenly spaced wavelengths', () => {
  const uneven = { ...spectrum, wavelength: spectrum.wavelength.map((value) => value ** 1.01) };
  expect(() => writeSpectrumImage(uneven)).toThrow(RangeError);
});

it('writes long strings over several cards', () => {
  const long = `It's a name ${'of many letters '.repeat(12)}'`;
  const { spectra } = readSpectra(writeSpectrumFits({ ...spectrum, name: long }), 'file');
  expect(spectra[0].name).toBe(long.trim());
});

import { describe, expect, it } from 'vitest';
import { InputProblem } from '$lib/domain/input-problem';
import type { Instrument } from '$lib/domain/instrument';
import { MASK, type RawSpectrum } from '$lib/domain/spectrum';
import { SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';
import { vacuumToAir } from './air-vacuum';
import { barycentricVelocityKms } from './barycentric';
import { fluxScaleCgs, toSpectrum } from './to-spectrum';

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

const frame = (changes: Partial<RawSpectrum['frame']>) => ({ frame: { ...raw().frame, ...changes } });
const reversed = <T extends Float64Array | Uint8Array>(values: T): T => values.slice().reverse() as T;

/** 1e-9 is 0.3 m/s. */
function expectSameWavelengths(ours: Float64Array, theirs: ArrayLike<number>): void {
  expect(ours).toHaveLength(theirs.length);
  ours.forEach((value, i) => expect(Math.abs(value / theirs[i] - 1)).toBeLessThan(1e-9));
}

describe('the same spectrum said in other ways', () => {
  const plain = toSpectrum(raw());

  it.each([
    ['nm', 10, 0.1],
    ['µm', 1e4, 1e-4],
    ['m', 1e10, 1e-10],
  ])('in %s gives the same wavelengths', (_, scale, factor) => {
    const said = toSpectrum(
      raw({ wavelength: angstrom.map((value) => value * factor), wavelengthScaleAngstrom: scale }),
    );
    expectSameWavelengths(said.wavelength, plain.wavelength);
  });

  it('in reverse order gives the same pixels', () => {
    const said = toSpectrum(
      raw({ wavelength: reversed(angstrom), flux: reversed(raw().flux), variance: reversed(raw().variance!) }),
    );
    expectSameWavelengths(said.wavelength, plain.wavelength);
    expect(said.flux).toEqual(plain.flux);
    expect(said.edges).toEqual(plain.edges);
  });

  it('in air gives the same wavelengths', () => {
    const said = toSpectrum(raw({ wavelength: angstrom.map(vacuumToAir), ...frame({ medium: 'air' }) }));
    expectSameWavelengths(said.wavelength, plain.wavelength);
    expect(said.medium).toBe('air');
  });

  it('as seen from the observatory gives the same wavelengths', () => {
    const { raDegrees, decDegrees } = raw();
    const { midExposureJulianDateUtc, observatoryMetres } = raw().frame;
    const kms = barycentricVelocityKms({
      raDegrees: raDegrees!,
      decDegrees: decDegrees!,
      julianDateUtc: midExposureJulianDateUtc!,
      observatoryMetres,
    });
    const factor = 1 + kms / SPEED_OF_LIGHT_KMS;
    const said = toSpectrum(
      raw({ wavelength: angstrom.map((value) => value / factor), ...frame({ specsys: 'TOPOCENT' }) }),
    );
    expectSameWavelengths(said.wavelength, plain.wavelength);
    expect(said.barycentricKms).toBeCloseTo(kms, 9);
    expect(plain.barycentricKms).toBeNull();
    expect(said.observerFactor).toBeCloseTo(1 / factor, 12);
    expect(plain.observerFactor).toBe(said.observerFactor);
  });

  it('with values and unit scaled together gives the same flux in CGS', () => {
    const said = toSpectrum(
      raw({ flux: raw().flux.map((value) => value * 1e-17), fluxUnit: 'erg s-1 cm-2 Angstrom-1' }),
    );
    said.flux.forEach((value, i) =>
      expect(value * said.fluxScaleCgs!).toBeCloseTo(plain.flux[i] * plain.fluxScaleCgs!, 25),
    );
  });
});

describe('frames that are not known', () => {
  it('doubts the wavelengths where the medium is not said', () => {
    const said = toSpectrum(raw(frame({ medium: null })));
    expect(said.wavelengthDoubt).toBe(true);
    expect(said.warnings.join()).toContain('air or vacuum');
  });

  it('doubts the wavelengths where the velocity frame is not said, or is no frame that is turned', () => {
    expect(toSpectrum(raw(frame({ specsys: null }))).wavelengthDoubt).toBe(true);
    expect(toSpectrum(raw(frame({ specsys: 'LSRK' }))).wavelengthDoubt).toBe(true);
    expect(toSpectrum(raw()).wavelengthDoubt).toBe(false);
  });

  it('doubts topocentric wavelengths without time, place or position, and says which is missing', () => {
    const said = toSpectrum(raw({ ...frame({ specsys: 'TOPOCENT', observatoryMetres: null }), raDegrees: null }));
    expect(said.wavelengthDoubt).toBe(true);
    expect(said.barycentricKms).toBeNull();
    expect(said.warnings.join()).toContain('RA and DEC, the position of the telescope missing');
    expectSameWavelengths(said.wavelength, angstrom);
  });

  it('takes out all but the rotation of the Earth where the position of the telescope is missing', () => {
    const whole = toSpectrum(raw(frame({ specsys: 'TOPOCENT' })));
    const said = toSpectrum(raw(frame({ specsys: 'TOPOCENT', observatoryMetres: null })));
    expect(said.wavelengthDoubt).toBe(true);
    expect(Math.abs(said.barycentricKms! - whole.barycentricKms!)).toBeLessThan(0.5);
    expect(said.barycentricKms).not.toBe(whole.barycentricKms);
  });

  it('takes heliocentric wavelengths for barycentric ones without a doubt: they differ by 0.02 km/s at most', () => {
    const said = toSpectrum(raw({ ...frame({ specsys: 'HELIOCEN', midExposureJulianDateUtc: null }) }));
    expect(said.wavelengthDoubt).toBe(false);
  });

  it('fills them from the instrument', () => {
    const instrument: Instrument = {
      name: 'spectrograph',
      medium: 'air',
      specsys: 'TOPOCENT',
      site: { latitudeDegrees: 32.780361, longitudeEastDegrees: -105.820417, heightMetres: 2788 },
    };
    const said = toSpectrum(raw(frame({ medium: null, specsys: null, observatoryMetres: null })), instrument);
    expect(said.wavelengthDoubt).toBe(false);
    expect(said.medium).toBe('air');
    const whole = toSpectrum(raw(frame({ medium: 'air', specsys: 'TOPOCENT' })));
    expect(said.barycentricKms).toBeCloseTo(whole.barycentricKms!, 6);
  });
});

describe('pixels that cannot be used', () => {
  it('keep their place with variance Infinity and the reason', () => {
    const flux = raw().flux.slice();
    flux[3] = Number.NaN;
    const variance = raw().variance!.slice();
    variance[5] = Number.POSITIVE_INFINITY;
    const bad = new Uint8Array(n);
    bad[7] = 1;
    const instrument: Instrument = {
      name: 'spectrograph',
      badRegionsAngstrom: [[angstrom[20] - 0.1, angstrom[22] + 0.1]],
    };
    const said = toSpectrum(raw({ flux, variance, bad, ...frame({ midExposureJulianDateUtc: null }) }), instrument);
    expect(said.mask[3]).toBe(MASK.notFinite);
    expect(said.flux[3]).toBe(0);
    expect(said.mask[5]).toBe(MASK.noVariance);
    expect(said.mask[7]).toBe(MASK.fileMask);
    expect(Array.from(said.mask.slice(19, 24))).toEqual([0, MASK.badRegion, MASK.badRegion, MASK.badRegion, 0]);
    for (const i of [3, 5, 7, 21]) expect(said.variance[i]).toBe(Number.POSITIVE_INFINITY);
    expect(said.variance[4]).toBe(0.04);
  });

  it('are put into gaps', () => {
    const keep = (values: Float64Array) => values.filter((_, i) => i < 50 || i >= 60);
    const said = toSpectrum(
      raw({ wavelength: keep(angstrom), flux: keep(raw().flux), variance: keep(raw().variance!) }),
    );
    expect(said.wavelength).toHaveLength(n);
    expect(said.mask.slice(50, 60).every((bits) => bits === (MASK.notFinite | MASK.noVariance))).toBe(true);
  });

  it('estimates a variance where the file has none, and says so', () => {
    const flux = Float64Array.from({ length: n }, (_, i) => ((i * 7919) % 101) / 101);
    const said = toSpectrum(raw({ flux, variance: null }));
    expect(said.varianceKnown).toBe(false);
    expect(said.variance[0]).toBeGreaterThan(0);
    expect(said.variance[0]).toBe(said.variance[n - 1]);
  });
});

describe('spectra that cannot be measured', () => {
  const swapped = angstrom.slice();
  [swapped[10], swapped[11]] = [swapped[11], swapped[10]];
  const repeated = angstrom.slice();
  repeated[10] = repeated[9];
  it.each([
    ['unordered wavelengths', { wavelength: swapped }, 'wavelength-unordered'],
    ['repeated wavelengths', { wavelength: repeated }, 'wavelength-repeated'],
    ['all NaN', { flux: new Float64Array(n).fill(Number.NaN) }, 'flux-not-finite'],
    ['zero variance', { variance: new Float64Array(n).fill(Number.POSITIVE_INFINITY) }, 'variance-zero'],
    ['everything masked', { bad: new Uint8Array(n).fill(1) }, 'no-usable-pixels'],
    ['arrays of unequal length', { flux: new Float64Array(n - 1) }, 'lengths-differ'],
    ['negative wavelengths', { wavelength: angstrom.map((value) => value - 1e5) }, 'wavelength-invalid'],
  ])('%s', (_, changes, code) => {
    const attempt = () => toSpectrum(raw(changes));
    expect(attempt).toThrow(InputProblem);
    try {
      attempt();
    } catch (error) {
      expect((error as InputProblem).problem.code).toBe(code);
    }
  });
});

it('knows the scale of absolute flux, and none of counts', () => {
  expect(fluxScaleCgs('1e-17 erg s-1 cm-2 Angstrom-1')).toBe(1e-17);
  expect(fluxScaleCgs('erg s-1 cm-2 Angstrom-1')).toBe(1);
  expect(fluxScaleCgs('count')).toBeNull();
  expect(fluxScaleCgs(null)).toBeNull();
});

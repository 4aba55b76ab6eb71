// Outside source: sky spectra of the Sloan Digital Sky Survey, see data/real-sky/SOURCE.md.
import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import type { Instrument } from '../../src/lib/domain/instrument';
import { readSpectra } from '../../src/lib/formats/read-spectra';
import { barycentricVelocityKms } from '../../src/lib/science/frames/barycentric';
import { checkSkyLines } from '../../src/lib/science/frames/sky-lines';
import { toSpectrum } from '../../src/lib/science/frames/to-spectrum';
import { FWHM_PER_SIGMA, SPEED_OF_LIGHT_KMS } from '../../src/lib/science/constants/physical';

const instrument: Instrument = {
  name: 'survey spectrograph',
  medium: 'vacuum',
  specsys: 'HELIOCEN',
  columns: {
    extension: 1,
    wavelength: 'loglam',
    wavelengthScale: 'log10',
    flux: 'flux',
    fluxUnit: '1e-17 erg/s/cm2/Angstrom',
    inverseVariance: 'ivar',
    sky: 'sky',
    lsfSigmaPixels: 'wdisp',
  },
};

const APACHE_POINT = [-1463998.701, -5166633.734, 3435013.972] as const;

/** Position of the fibre and mid-exposure as the survey's own tables give them; the observatory is Apache Point. */
const cases = [
  { name: 'spec-0390-51900-0282.fits.gz', raDegrees: 4.191846, decDegrees: -1.10821 },
  { name: 'spec-2880-54509-0230.fits.gz', raDegrees: 185.8189, decDegrees: 4.836145 },
  { name: 'spec-4176-55682-0865.fits.gz', raDegrees: 253.73738, decDegrees: 18.874952 },
];

describe.each(cases)('$name, read by an instrument description', ({ name, raDegrees, decDegrees }) => {
  const bytes = new Uint8Array(readFileSync(new URL(`./data/real-sky/${name}`, import.meta.url)));
  const { spectra, problems } = readSpectra(bytes, name, instrument);
  const spectrum = toSpectrum(spectra[0], instrument);

  it('is one spectrum, vacuum, without a doubt about its wavelengths', () => {
    expect(problems).toEqual([]);
    expect(spectra).toHaveLength(1);
    expect(spectrum.wavelengthDoubt).toBe(false);
    expect(spectrum.fluxScaleCgs).toBe(1e-17);
    expect(spectrum.wavelength[0]).toBeGreaterThan(3500);
    expect(spectrum.lsfSource).toBe('file');
    const power = spectrum.wavelength[2000] / (spectrum.lsfSigma[2000] * FWHM_PER_SIGMA);
    expect(power).toBeGreaterThan(1400);
    expect(power).toBeLessThan(2600);
  });

  it('has its sky lines off by the velocity that the survey took out, to 5 km/s', () => {
    // The header has no position of the telescope, so the sky still stands in the shifted frame.
    expect(spectrum.observerFactor).toBe(1);
    const check = checkSkyLines(spectrum)!;
    expect(check.lines.length).toBeGreaterThan(12);
    expect(check.scatterKms).toBeLessThan(6);
    // The card's sign is the wrong way round, which is why velocity cards are never applied.
    expect(Math.abs(check.offsetKms + (spectra[0].header.HELIO_RV as number))).toBeLessThan(5);
  });

  it('has them where the barycentric velocity of that night puts them', () => {
    const { header } = spectra[0];
    // The survey's MJD names a night; its middle at the observatory is about 0.3 days into the day, good to 0.3 km/s.
    const mjd = typeof header.TAI === 'number' ? header.TAI / 86400 : (header.MJD as number) + 0.3;
    const kms = barycentricVelocityKms({
      raDegrees,
      decDegrees,
      julianDateUtc: mjd + 2_400_000.5,
      observatoryMetres: APACHE_POINT,
    });
    const check = checkSkyLines({ ...spectrum, observerFactor: 1 / (1 + kms / SPEED_OF_LIGHT_KMS) })!;
    expect(Math.abs(check.offsetKms)).toBeLessThan(6);
  });
});

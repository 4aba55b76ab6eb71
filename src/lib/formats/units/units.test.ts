import { describe, expect, it } from 'vitest';
import { parseFluxUnit, scaleToFlux } from './flux-unit';
import { parseUnit } from './parse-unit';
import { parseSpectralUnit } from './spectral-unit';

describe('wavelength units', () => {
  it.each([
    ['Angstrom', 1],
    ['ANGSTROMS', 1],
    ['angstrom', 1],
    ['Ang', 1],
    ['A', 1],
    ['AA', 1],
    ['Å', 1],
    ['0.1nm', 1],
    ['nm', 10],
    ['NM', 10],
    ['nanometer', 10],
    ['um', 1e4],
    ['µm', 1e4],
    ['micron', 1e4],
    ['microns', 1e4],
    ['mm', 1e7],
    ['m', 1e10],
    ['10**-10 m', 1],
    ['10^-10 m', 1],
    ['1e-10 m', 1],
  ])('%s is %d ångström', (text, angstrom) => {
    expect(parseSpectralUnit(text)).toMatchObject({ quantity: 'wavelength', logarithm: null, scaleAngstrom: angstrom });
  });

  it.each([
    ['log(Angstrom)', 'log10', 1],
    ['log10(Angstrom)', 'log10', 1],
    ['dex(nm)', 'log10', 10],
    ['log Angstrom', 'log10', 1],
    ['ln(um)', 'ln', 1e4],
  ])('%s is a logarithm', (text, logarithm, angstrom) => {
    expect(parseSpectralUnit(text)).toMatchObject({ quantity: 'wavelength', logarithm, scaleAngstrom: angstrom });
  });

  it.each([
    ['Hz', 'frequency', 1],
    ['THz', 'frequency', 1e12],
    ['eV', 'energy', 1.602176634e-19],
    ['cm**(-1)', 'wavenumber', 100],
    ['1/m', 'wavenumber', 1],
  ])('%s counts %s', (text, quantity, si) => {
    expect(parseSpectralUnit(text)).toMatchObject({ quantity, si });
  });

  it.each(['furlong', 'kg', 'km/s', 'count', '(', 'm)', 'nm nm', '', '**', 'm**', '1e400', 'x'.repeat(300)])(
    '%s is none',
    (text) => {
      expect(parseSpectralUnit(text)).toBeNull();
    },
  );
});

describe('flux units', () => {
  const words = 'erg s-1 cm-2 Angstrom-1';
  it.each([
    ['10**(-17) erg s**(-1) cm**(-2) Angstrom**(-1)', `1e-17 ${words}`],
    ['1E-17 erg/cm^2/s/Ang', `1e-17 ${words}`],
    ['1e-17 erg/s/cm2/Angstrom', `1e-17 ${words}`],
    ['10^-17 ergs/s/cm^2/A', `1e-17 ${words}`],
    ['10-17 erg cm-2 s-1 A-1', `1e-17 ${words}`],
    ['1e-17 erg / (Angstrom cm2 s)', `1e-17 ${words}`],
    ['erg.s-1.cm-2.Angstrom-1', words],
    ['erg s-1 cm-2 Angstrom-1', words],
    ['erg/s/cm**2/nm', `0.1 ${words}`],
    ['W/m2/um', `0.1 ${words}`],
    ['W m-2 nm-1', `100 ${words}`],
    ['W m-3', `1e-7 ${words}`],
  ])('%s', (text, expected) => {
    expect(parseFluxUnit(text)).toMatchObject({ text: expected, unknown: false });
  });

  it.each(['Jy', 'count', 'adu', 'electron/s', 'erg/s/cm2/Angstrom/arcsec2'])('%s is kept as it is', (text) => {
    expect(parseFluxUnit(text)).toMatchObject({ text, unknown: false });
  });

  it('says which are not known', () => {
    expect(parseFluxUnit('bananas').unknown).toBe(true);
    expect(parseFluxUnit(null)).toEqual({ text: null, unit: null, unknown: false });
  });

  it('brings errors, variances and inverse variances to the unit of the flux', () => {
    const flux = parseFluxUnit('1e-17 erg/s/cm2/Angstrom');
    expect(scaleToFlux('erg/s/cm2/Angstrom', flux, 1)).toBe(1e17);
    expect(scaleToFlux('1e-34 erg2/s2/cm4/Angstrom2', flux, 2)).toBe(1);
    expect(scaleToFlux('10**(34) erg**(-2) s**2 cm**4 Angstrom**2', flux, -2)).toBe(1);
    expect(scaleToFlux('erg**(-2) s**2 cm**4 Angstrom**2', flux, -2)).toBe(1e-34);
  });

  it('takes a unit of other dimensions for a slip of the pen', () => {
    const flux = parseFluxUnit('1e-17 erg/s/cm2/Angstrom');
    expect(scaleToFlux('1e-17 erg/s/cm2/Angstrom', flux, 2)).toBe(1);
    expect(scaleToFlux(null, flux, 1)).toBe(1);
  });
});

it('divides by the next factor only, as FITS 4.0 reads a slash', () => {
  expect(parseUnit('m/s m')!.unit).toMatchObject({ length: 2, time: -1 });
  expect(parseUnit('m/(s m)')!.unit).toMatchObject({ length: 0, time: -1 });
});

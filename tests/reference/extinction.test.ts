// Source: Cardelli, Clayton & Mathis (1989, ApJ 345, 245) table 3; O'Donnell (1994) through Schlegel, Finkbeiner & Davis (1998,
// ApJ 500, 525) table 6; Calzetti et al. (2000, ApJ 533, 682) eq. 4. Values: data/extinction-reference.json, which says of each
// block where it was seen, its tolerance, and what was computed with Debian's python3-extinction 0.4.6.
import { describe, expect, it } from 'vitest';
import { dustTransmission, extinctionRelativeToV, type ExtinctionLaw } from '$lib/science/constants/extinction';
import reference from './data/extinction-reference.json';

const relative = (value: number, expected: number) => Math.abs(value / expected - 1);

describe('Cardelli, Clayton & Mathis (1989)', () => {
  it('reproduces table 3 within what the published coefficients allow', () => {
    const { xInvMicron, band, AlambdaOverAv } = reference.ccm89Table3;
    xInvMicron.forEach((x, i) => {
      // the H and K entries are printed to three digits: 0.190 and 0.114 against 0.192 and 0.116
      const tolerance = band[i] === 'B' ? 0.016 : 'HK'.includes(band[i]) ? 0.016 : 0.0021;
      expect(relative(extinctionRelativeToV(1e4 / x, 'cardelli-1989'), AlambdaOverAv[i]), band[i]).toBeLessThan(
        tolerance,
      );
    });
  });

  it.each(Object.entries(reference.ccm89ByRv.valuesByRv))(
    'reproduces stored values for R_V %s to 1e-7',
    (rv, values) => {
      reference.ccm89ByRv.xInvMicron.forEach((x, i) => {
        expect(relative(extinctionRelativeToV(1e4 / x, 'cardelli-1989', Number(rv)), values[i]), `x ${x}`).toBeLessThan(
          1e-7,
        );
      });
    },
  );
});

describe("O'Donnell (1994)", () => {
  it('reproduces table 6 of Schlegel et al. (1998)', () => {
    const { wavelengthA, AlambdaOverAv } = reference.sfd98Table6;
    wavelengthA.forEach((wavelength, i) => {
      const value = extinctionRelativeToV(wavelength, 'odonnell-1994');
      expect(relative(value, AlambdaOverAv[i]), `${wavelength}`).toBeLessThan(0.0051);
    });
  });
});

describe('grid of a general extinction library', () => {
  const { wavelengthA, ccm89, odonnell94, calzetti2000_Rv4p05: calzetti } = reference.libraryGrid;
  const blocks: [ExtinctionLaw, number, number[]][] = [
    ...Object.entries(ccm89).map(([rv, v]): [ExtinctionLaw, number, number[]] => ['cardelli-1989', Number(rv), v]),
    ...Object.entries(odonnell94).map(([rv, v]): [ExtinctionLaw, number, number[]] => ['odonnell-1994', Number(rv), v]),
    ['calzetti-2000', 4.05, calzetti],
  ];
  it.each(blocks)('%s, R_V %d agrees to the printed six digits', (law, rv, values) => {
    wavelengthA.forEach((wavelength, i) => {
      expect(Math.abs(extinctionRelativeToV(wavelength, law, rv) - values[i]), `${wavelength}`).toBeLessThan(2e-6);
    });
  });
});

it('dims by the definition of a magnitude: E(B-V) = 1 and R_V = 3.1 dim the V band by 3.1 mag (1 / 1.82 micron, eq. 3)', () => {
  expect(dustTransmission(1e4 / 1.82, 1, 'cardelli-1989')).toBeCloseTo(Math.pow(10, -0.4 * 3.1), 6);
  expect(dustTransmission(5000, 0, 'calzetti-2000')).toBe(1);
});

it('refuses a wavelength that is not positive', () => {
  expect(() => extinctionRelativeToV(0, 'cardelli-1989')).toThrow(RangeError);
  expect(() => extinctionRelativeToV(NaN, 'cardelli-1989')).toThrow(RangeError);
});

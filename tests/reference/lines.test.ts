import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import {
  EMISSION_LINES,
  EXPECTED_LINES,
  hydrogenLevelEnergyEv,
  lineByName,
} from '../../src/lib/science/constants/lines';
import { RYDBERG_HYDROGEN_PER_METRE, SPEED_OF_LIGHT_KMS } from '../../src/lib/science/constants/physical';

interface ReferenceLine {
  ion: string;
  name: string;
  transition: string;
  wavelengthVacuum: number;
  flagDisagreementOver0p02A: string[];
}

const reference = (
  JSON.parse(readFileSync(new URL('./data/lines/rest-wavelengths.json', import.meta.url), 'utf8')) as {
    lines: ReferenceLine[];
  }
).lines;

/** Entries whose value is chosen among differing sources: H-alpha's emission centroid and the helium multiplets. */
const differing = (line: ReferenceLine) => line.flagDisagreementOver0p02A.length > 0 || line.ion.startsWith('He I');

const nearest = (wavelength: number) =>
  EMISSION_LINES.reduce((best, line) =>
    Math.abs(line.wavelengthVacuum - wavelength) < Math.abs(best.wavelengthVacuum - wavelength) ? line : best,
  );

describe('rest wavelengths against the NIST ASD energy levels', () => {
  it.each(reference.filter((line) => !differing(line)).map((line) => [line.name, line] as const))(
    '%s lies within 0.02 Å',
    (_name, line) => {
      expect(Math.abs(nearest(line.wavelengthVacuum).wavelengthVacuum - line.wavelengthVacuum)).toBeLessThan(0.02);
    },
  );

  it.each(reference.filter(differing).map((line) => [line.name, line] as const))(
    '%s, where sources differ, lies within the spread of the sources and says why',
    (_name, line) => {
      const ours = nearest(line.wavelengthVacuum);
      expect(Math.abs(ours.wavelengthVacuum - line.wavelengthVacuum)).toBeLessThan(0.25);
      expect(ours.source.length).toBeGreaterThan(10);
    },
  );

  it('takes H-alpha at the emission centroid, within 1.1 km/s of the NIST level mean', () => {
    const shift = (6564.632 - lineByName('H-alpha 6565').wavelengthVacuum) / 6564.61;
    expect(Math.abs(shift) * SPEED_OF_LIGHT_KMS).toBeLessThan(1.1);
  });

  it('has every hydrogen line within 4 km/s of the reduced-mass Rydberg formula', () => {
    for (const line of EMISSION_LINES.filter((entry) => entry.series)) {
      const { lowerLevel: lower, upperLevel: upper } = line as { lowerLevel: number; upperLevel: number };
      const rydberg = 1e10 / (RYDBERG_HYDROGEN_PER_METRE * (1 / lower ** 2 - 1 / upper ** 2));
      expect(Math.abs(rydberg / line.wavelengthVacuum - 1) * SPEED_OF_LIGHT_KMS).toBeLessThan(4);
    }
  });

  it('gives photon energies that equal the differences of the levels', () => {
    for (const line of EMISSION_LINES.filter((entry) => entry.series)) {
      const energy = hydrogenLevelEnergyEv(line.upperLevel!) - hydrogenLevelEnergyEv(line.lowerLevel!);
      expect(Math.abs(energy / line.photonEnergyEv - 1)).toBeLessThan(4e-6);
    }
    expect(hydrogenLevelEnergyEv(1)).toBeCloseTo(-13.5984, 3);
  });

  it('covers the series and ions of the trade, each name once', () => {
    const names = EMISSION_LINES.map((line) => line.name);
    expect(new Set(names).size).toBe(names.length);
    for (const ion of ['He I', 'He II', '[O I]', '[O II]', '[O III]', '[N II]', '[S II]', '[S III]', '[Ne III]']) {
      expect(EMISSION_LINES.some((line) => line.ion === ion)).toBe(true);
    }
    for (const ion of ['[Ne V]', '[Ar III]', 'C III]', 'C IV', 'N V', 'Si IV', 'Mg II']) {
      expect(EMISSION_LINES.some((line) => line.ion === ion)).toBe(true);
    }
    for (const series of ['Lyman', 'Balmer', 'Paschen']) {
      expect(EMISSION_LINES.filter((line) => line.series === series).length).toBeGreaterThan(10);
    }
    expect(EXPECTED_LINES.length).toBeGreaterThan(40);
  });
});

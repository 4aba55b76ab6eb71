// Outside sources: astropy 5.2.1 (Wright and Eastman 2014, ERFA ephemeris) and Starlink rv; see data/barycentric/SOURCE.md.
import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import {
  barycentricVelocityKms,
  heliocentricToBarycentricKms,
  heliocentricVelocityKms,
} from '../../src/lib/science/frames/barycentric';

function rows(name: string): Record<string, string>[] {
  const text = readFileSync(new URL(`./data/barycentric/${name}`, import.meta.url), 'utf8');
  const [head, ...lines] = text.trim().split('\n');
  const keys = head.split(',');
  return lines.map((line) => Object.fromEntries(line.split(',').map((value, i) => [keys[i], value])));
}

const sighting = (row: Record<string, string>) => ({
  raDegrees: Number(row.raIcrsDeg),
  decDegrees: Number(row.decIcrsDeg),
  julianDateUtc: Number(row.mjdUtc) + 2_400_000.5,
  observatoryMetres: [Number(row.OBSGEO_X), Number(row.OBSGEO_Y), Number(row.OBSGEO_Z)] as [number, number, number],
});

describe('barycentric corrections against astropy', () => {
  const cases = rows('barycentric-cases.csv');

  it('agree within 2 m/s for 40 cases (10 m/s are asked for; 1.2 were measured)', () => {
    expect(cases).toHaveLength(40);
    for (const row of cases) {
      expect(Math.abs(1000 * barycentricVelocityKms(sighting(row)) - Number(row.barycentricMs))).toBeLessThan(2);
    }
  });

  it('differ from heliocentric ones by the motion of the Sun, to 6 m/s (the relativistic terms are in one only)', () => {
    for (const row of cases) {
      const difference = 1000 * heliocentricToBarycentricKms(sighting(row));
      expect(Math.abs(difference - Number(row.baryMinusHelioMs))).toBeLessThan(6);
    }
  });
});

describe('heliocentric corrections', () => {
  it('agree with astropy within 2 m/s', () => {
    for (const row of rows('barycentric-cases.csv')) {
      expect(Math.abs(1000 * heliocentricVelocityKms(sighting(row)) - Number(row.heliocentricMs))).toBeLessThan(2);
    }
  });

  it('agree with Starlink rv within 0.01 km/s, the step it prints', () => {
    const cases = rows('starlink-rv-cases.csv');
    expect(cases).toHaveLength(50);
    for (const row of cases) {
      const difference = heliocentricVelocityKms(sighting(row)) - Number(row.heliocentricCorrectionKms_rv);
      expect(Math.abs(difference)).toBeLessThan(0.01);
    }
  });
});

// Outside sources: Ciddor (1996, Applied Optics 35, 1566) and Morton (2000, ApJS 130, 403), by data/lines/rest-wavelengths.json.
import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { airToVacuum, vacuumToAir } from '../../src/lib/science/frames/air-vacuum';
import { SPEED_OF_LIGHT_KMS } from '../../src/lib/science/constants/physical';

interface ReferenceLine {
  name: string;
  wavelengthVacuum: number;
  wavelengthAir: number | null;
  wavelengthAirMorton2000: number | null;
}

const { lines } = JSON.parse(readFileSync(new URL('./data/lines/rest-wavelengths.json', import.meta.url), 'utf8')) as {
  lines: ReferenceLine[];
};
const inAir = lines.filter((line) => line.wavelengthAir !== null && line.wavelengthVacuum > 2001);
const kms = (ours: number, theirs: number) => (ours / theirs - 1) * SPEED_OF_LIGHT_KMS;

/** Morton (2000, ApJS 130, 403), equation 8: index of air at a vacuum wavelength in ångström. */
function mortonIndex(vacuum: number): number {
  const s2 = (1e4 / vacuum) ** 2;
  return 1 + 8.34254e-5 + 2.406147e-2 / (130 - s2) + 1.5998e-4 / (38.9 - s2);
}

describe('air and vacuum wavelengths', () => {
  it('agree with Ciddor (1996) to the digits of the table (0.1 km/s are asked for)', () => {
    expect(inAir.length).toBeGreaterThan(50);
    for (const line of inAir) {
      // The table has four decimals of an ångström: 0.01 km/s at 3000 Å.
      expect(Math.abs(kms(vacuumToAir(line.wavelengthVacuum), line.wavelengthAir!))).toBeLessThan(0.01);
      expect(Math.abs(kms(airToVacuum(line.wavelengthAir!), line.wavelengthVacuum))).toBeLessThan(0.01);
    }
  });

  it('agree with the other formula, Morton (2000), to 0.05 km/s', () => {
    for (const line of inAir) {
      expect(Math.abs(kms(vacuumToAir(line.wavelengthVacuum), line.wavelengthAirMorton2000!))).toBeLessThan(0.05);
    }
    for (let vacuum = 3000; vacuum <= 25000; vacuum += 50) {
      expect(Math.abs(kms(vacuumToAir(vacuum), vacuum / mortonIndex(vacuum)))).toBeLessThan(0.05);
    }
  });

  it('differ by 83 km/s in the middle of the optical (common practice, no source)', () => {
    expect(kms(6000, vacuumToAir(6000))).toBeCloseTo(83, 0);
  });
});

import { expect, it } from 'vitest';
import { airToVacuum, refractiveIndex, vacuumToAir } from './air-vacuum';

it('goes there and back to 1e-12', () => {
  for (let angstrom = 2001; angstrom < 30_000; angstrom *= 1.01) {
    expect(Math.abs(airToVacuum(vacuumToAir(angstrom)) / angstrom - 1)).toBeLessThan(1e-12);
  }
});

it('leaves wavelengths below 2000 Å alone, where air wavelengths are not in use', () => {
  expect(airToVacuum(1215.67)).toBe(1215.67);
  expect(vacuumToAir(1215.67)).toBe(1215.67);
});

it('has more refraction towards the blue', () => {
  expect(refractiveIndex(4000)).toBeGreaterThan(refractiveIndex(8000));
});

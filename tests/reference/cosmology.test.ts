// Source: astropy 5.2.1 (general astronomy library), FlatLambdaCDM(H0=70, Om0=0.3, Tcmb0=0) and Planck18 (Planck Collaboration 2020,
// A&A 641, A6); the table and its making are described in data/cosmology/meta.json. The formulas are Hogg (1999, astro-ph/9905116).
import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import {
  angularDiameterDistanceMpc,
  comovingDistanceMpc,
  distanceModulus,
  lookbackTimeGyr,
  luminosityDistanceMpc,
  volumeElementMpc3,
  type FlatCosmology,
} from '$lib/science/cosmology/distances';

const rows = readFileSync(new URL('./data/cosmology/distances.csv', import.meta.url), 'utf8')
  .trim()
  .split('\n')
  .slice(1)
  .map((line) => {
    const [, model, rest] = /^(".*?"|[^,]*),(.*)$/.exec(line)!;
    const [z, comoving, luminosity, angular, modulus, lookback] = rest.split(',').map(Number);
    return { flat: model.includes('FlatLambdaCDM(H0=70'), z, comoving, luminosity, angular, modulus, lookback };
  });

const relative = (value: number, expected: number) => Math.abs(value / expected - 1);

it('has both models of the table', () => {
  expect(rows.filter((row) => row.flat)).toHaveLength(30);
  expect(rows.filter((row) => !row.flat)).toHaveLength(30);
});

describe('flat model, H0 = 70, Omega_m = 0.3', () => {
  it.each(rows.filter((row) => row.flat))('agrees within 1e-5 at z = $z', (row) => {
    expect(relative(comovingDistanceMpc(row.z), row.comoving)).toBeLessThan(1e-5);
    expect(relative(luminosityDistanceMpc(row.z), row.luminosity)).toBeLessThan(1e-5);
    expect(relative(angularDiameterDistanceMpc(row.z), row.angular)).toBeLessThan(1e-5);
    expect(relative(lookbackTimeGyr(row.z), row.lookback)).toBeLessThan(1e-5);
    expect(Math.abs(distanceModulus(row.z) - row.modulus)).toBeLessThan(1e-5);
  });
});

describe('Planck 2018 parameters, which carry radiation and neutrinos that the flat model leaves out', () => {
  const planck: FlatCosmology = { hubbleConstant: 67.66, omegaMatter: 0.30966 };
  it.each(rows.filter((row) => !row.flat))('stays within 0.2 % at z = $z', (row) => {
    expect(relative(comovingDistanceMpc(row.z, planck), row.comoving)).toBeLessThan(0.002);
  });
});

it('has a volume element that sums to the comoving sphere: integral of dV/dz/dOmega = D_C^3 / 3', () => {
  let sum = 0;
  const steps = 400;
  for (let i = 0; i < steps; i++) sum += (volumeElementMpc3((2 * (i + 0.5)) / steps) * 2) / steps;
  expect(relative(sum, comovingDistanceMpc(2) ** 3 / 3)).toBeLessThan(1e-5);
});

it('agrees with the closed form for a universe of matter alone: D_C = 2 c / H0 (1 - 1 / sqrt(1 + z))', () => {
  const flat = { hubbleConstant: 70, omegaMatter: 1 };
  const closed = (z: number) => ((2 * 299792.458) / 70) * (1 - 1 / Math.sqrt(1 + z));
  for (const z of [0.01, 0.5, 3, 12]) expect(relative(comovingDistanceMpc(z, flat), closed(z))).toBeLessThan(1e-9);
});

it('refuses what has no distance', () => {
  expect(() => comovingDistanceMpc(-1)).toThrow(RangeError);
  expect(() => comovingDistanceMpc(NaN)).toThrow(RangeError);
  expect(() => comovingDistanceMpc(1, { hubbleConstant: 0, omegaMatter: 0.3 })).toThrow(RangeError);
  expect(comovingDistanceMpc(0)).toBe(0);
});

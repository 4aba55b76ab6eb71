// Outside source: the sample night of tests/fixtures, made by a simulator that is not ours; truth.csv stands beside it.
import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { readSpectra } from '../../src/lib/formats/read-spectra';
import { toSpectrum } from '../../src/lib/science/frames/to-spectrum';
import { SPEED_OF_LIGHT_KMS } from '../../src/lib/science/constants/physical';

const folder = new URL('../fixtures/sample-night/', import.meta.url);
const [head, ...lines] = readFileSync(new URL('truth.csv', folder), 'utf8').trim().split('\n');
const keys = head.split(',');
// The columns read here stand before the first quoted one.
const truth = new Map(
  lines.map((line) => {
    const cells = line.split(',');
    return [cells[0], Object.fromEntries(keys.map((key, i) => [key, cells[i]]))];
  }),
);
const files = readdirSync(folder).filter((name) => name.startsWith('hz_'));

it('has 48 files', () => {
  expect(files).toHaveLength(48);
});

describe.each(files)('%s', (name) => {
  const row = truth.get(name)!;
  const { spectra, problems } = readSpectra(new Uint8Array(readFileSync(new URL(name, folder))), name);
  const spectrum = toSpectrum(spectra[0]);

  it('reads whole, with errors and an absolute flux', () => {
    expect(problems).toEqual([]);
    expect(spectra).toHaveLength(1);
    expect(spectra[0].name).toBe(row.object);
    // Files in white-space columns leave bad pixels out; filling the gaps brings them back.
    if (!name.endsWith('.dat')) expect(spectra[0].wavelength).toHaveLength(Number(row.npix));
    expect(spectrum.wavelength.length).toBeGreaterThanOrEqual(Number(row.npix));
    expect(spectrum.varianceKnown).toBe(true);
    expect([1, 1e-17]).toContain(spectrum.fluxScaleCgs);
  });

  it('is in the right medium and frame', () => {
    expect(spectrum.medium).toBe(row.medium);
    expect(spectrum.specsys).toBe(row.specsys);
    expect(spectrum.wavelengthDoubt).toBe(false);
    const observerKms = (1 / spectrum.observerFactor - 1) * SPEED_OF_LIGHT_KMS;
    // The barycentric step within 2 m/s of the simulator's, which used astropy (10 m/s are asked for).
    expect(Math.abs(observerKms - Number(row.vbary_kms))).toBeLessThan(0.002);
    if (row.specsys === 'TOPOCENT') expect(spectrum.barycentricKms).toBeCloseTo(Number(row.vbary_kms), 2);
    else if (row.specsys === 'HELIOCEN') expect(Math.abs(spectrum.barycentricKms!)).toBeLessThan(0.02);
    else expect(spectrum.barycentricKms).toBeNull();
    expect(spectrum.wavelength[0]).toBeGreaterThan(3000);
    expect(spectrum.wavelength.at(-1)!).toBeLessThan(12_000);
  });
});

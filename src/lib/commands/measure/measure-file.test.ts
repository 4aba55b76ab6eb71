import { describe, expect, it } from 'vitest';
import { imageUnit } from '$lib/formats/fits/write-table';
import { Random } from '$lib/science/simulate/random';
import { writeSpectrumFits } from '$lib/formats/write-spectrum';
import { measureFile, type MeasureTask } from './measure-file';

const n = 1500;
const wavelength = Float64Array.from({ length: n }, (_, i) => 5000 + 2 * i);
/** White noise of 0.05 from seeded draws of the project's own generator. */
const draws = new Random(17);
const noise = Array.from({ length: n }, () => 0.05 * draws.normal());
/** H-beta and [O III] at z = 0.2 over a flat continuum. */
const flux = wavelength.map((angstrom, i) => {
  const line = (rest: number, height: number) => height * Math.exp(-0.5 * ((angstrom - rest * 1.2) / 3.5) ** 2);
  return 1 + noise[i] + line(4862.68, 3) + line(4960.3, 3) + line(5008.24, 9) + line(6564.61, 9);
});
const error = new Float64Array(n).fill(0.05);
const table = writeSpectrumFits({
  name: 'CHO 1',
  wavelength,
  medium: 'vacuum',
  specsys: 'BARYCENT',
  flux,
  error,
  fluxUnit: '1e-17 erg s-1 cm-2 Angstrom-1',
  raDegrees: null,
  decDegrees: null,
  dateObs: null,
  exposureSeconds: null,
  observatoryMetres: null,
  resolvingPower: 1000,
});
const task = (bytes: Uint8Array, changes: Partial<MeasureTask> = {}): MeasureTask => ({
  id: 0,
  source: 'night/a.fits',
  bytes,
  explain: false,
  part: 0,
  parts: 1,
  ...changes,
});

describe('measureFile', () => {
  it('prints an object with where it came from and what was found', () => {
    const [line] = measureFile(task(table));
    const output = JSON.parse(line.json) as Record<string, unknown>;
    expect(line.failed).toBe(false);
    expect(Object.keys(output).slice(0, 4)).toEqual(['source', 'extension', 'row', 'name']);
    expect(output).toMatchObject({ source: 'night/a.fits', extension: 1, row: 1, name: 'CHO 1' });
    expect(Math.abs((output.redshift as number) - 0.2)).toBeLessThan(0.0005);
    expect(output.fluxUnit).toBe('1e-17 erg s-1 cm-2 Angstrom-1');
    expect(line.json).not.toContain('NaN');
  });

  it('explains in plain words where it is asked to', () => {
    expect(measureFile(task(table))[0].notes).toEqual([]);
    expect(measureFile(task(table, { explain: true }))[0].notes.join('\n')).toContain('z = 0.2');
  });

  it('gives an object with an error for what cannot be read', () => {
    const [line] = measureFile(task(new Uint8Array(0)));
    expect(line.failed).toBe(true);
    expect(JSON.parse(line.json)).toEqual({
      source: 'night/a.fits',
      extension: 0,
      row: 1,
      name: null,
      error: 'The file is empty. Copy the file again.',
    });
  });

  it('keeps the order of rows, faulty ones among them, however it is shared', () => {
    const stack = new Float64Array(n * 4);
    for (let row = 0; row < 4; row++) stack.set(row === 1 ? new Float64Array(n).fill(Number.NaN) : flux, row * n);
    const bytes = imageUnit(stack, [n, 4], null, [
      { keyword: 'CTYPE1', value: 'WAVE' },
      { keyword: 'CUNIT1', value: 'Angstrom' },
      { keyword: 'CRPIX1', value: 1 },
      { keyword: 'CRVAL1', value: 5000 },
      { keyword: 'CDELT1', value: 2 },
    ]);
    const whole = measureFile(task(bytes));
    const rows = whole.map((line) => (JSON.parse(line.json) as { row: number }).row);
    expect(rows).toEqual([1, 2, 3, 4]);
    expect(whole.map((line) => line.failed)).toEqual([false, true, false, false]);
    const shared = [0, 1, 2].flatMap((part) => measureFile(task(bytes, { part, parts: 3 })));
    shared.sort((a, b) => a.order - b.order);
    expect(shared).toEqual(whole);
  });
});

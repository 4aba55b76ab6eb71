import { gzipSync } from 'fflate';
import { describe, expect, it } from 'vitest';
import { toSpectrum } from '$lib/science/frames/to-spectrum';
import { Random } from '$lib/science/simulate/random';
import type { OutputCard } from './fits/write-header';
import { joinBytes } from './fits/write-header';
import { emptyPrimary, imageUnit, tableExtension } from './fits/write-table';
import { readSpectra } from './read-spectra';

const LIGHT_SPEED = 299_792_458;
const encoder = new TextEncoder();
const frame: OutputCard[] = [{ keyword: 'SPECSYS', value: 'BARYCENT' }];

function axis(type: string, unit: string | null, value: number, step: number, more: OutputCard[] = []): OutputCard[] {
  return [
    { keyword: 'CTYPE1', value: type },
    ...(unit ? [{ keyword: 'CUNIT1', value: unit }] : []),
    { keyword: 'CRPIX1', value: 1 },
    { keyword: 'CRVAL1', value },
    { keyword: 'CD1_1', value: step },
    ...frame,
    ...more,
  ];
}

function column(values: Float64Array, unit: string, name = 'WAVE'): Uint8Array {
  const table = tableExtension(
    [
      { name, form: 'D', values, unit },
      { name: 'FLUX', form: 'D', values: values.map(() => 1) },
    ],
    values.length,
    [{ keyword: 'TCTYP1', value: 'WAVE' }, ...frame],
  );
  return joinBytes([emptyPrimary([]), table]);
}

/** The vacuum wavelengths, ångström, that the product makes of a file. */
function wavelengths(bytes: Uint8Array): Float64Array {
  const { spectra, problems } = readSpectra(bytes, 'file');
  expect(problems).toEqual([]);
  return toSpectrum(spectra[0]).wavelength;
}

describe('one logarithmic grid said in other ways', () => {
  const random = new Random(4);
  it.each(Array.from({ length: 10 }, (_, i) => i))('gives the same wavelengths (draw %i)', () => {
    const n = 100 + random.integer(0, 400);
    const start = random.uniform(3000, 12_000);
    const step = random.uniform(2e-5, 4e-4);
    const grid = Float64Array.from({ length: n }, (_, i) => start * 10 ** (step * i));
    const ones = new Float64Array(n).fill(1);
    const um = start / 1e4;
    const files: Record<string, Uint8Array> = {
      'an axis in natural logarithm': imageUnit(ones, [n], null, axis('WAVE-LOG', 'um', um, um * Math.LN10 * step)),
      'an axis in log10 by unit': imageUnit(ones, [n], null, axis('WAVE', 'log(nm)', Math.log10(start / 10), step)),
      'an axis in log10 by convention': imageUnit(
        ones,
        [n],
        null,
        axis('LINEAR', null, Math.log10(start), step, [{ keyword: 'DC-FLAG', value: 1 }]),
      ),
      'a column in nm': column(
        grid.map((value) => value / 10),
        'nm',
      ),
      'a column in log10': column(grid.map(Math.log10), 'log(Angstrom)', 'loglam'),
      'a column in ln': column(
        grid.map((value) => Math.log(value / 1e4)),
        'ln(um)',
      ),
      'a column in frequency': column(
        grid.map((value) => LIGHT_SPEED / (value * 1e-10) / 1e12),
        'THz',
      ),
      'a column in reverse order, packed': gzipSync(column(grid.slice().reverse(), 'Angstrom')),
      'rows of text': encoder.encode(
        ['# wavelength unit: um', 'wave,flux', ...Array.from(grid, (value) => `${value / 1e4},1`)].join('\n'),
      ),
    };
    for (const [form, bytes] of Object.entries(files)) {
      const ours = wavelengths(bytes);
      expect(ours, form).toHaveLength(n);
      const worst = ours.reduce((most, value, i) => Math.max(most, Math.abs(value / grid[i] - 1)), 0);
      // 1e-11 is 3 mm/s.
      expect(worst, form).toBeLessThan(1e-11);
    }
  });
});

describe('one linear grid said in other ways', () => {
  it('gives the same wavelengths', () => {
    const n = 300;
    const grid = Float64Array.from({ length: n }, (_, i) => 4000 + 1.5 * i);
    const ones = new Float64Array(n).fill(1);
    const reversed = axis('WAVE', 'Angstrom', grid[n - 1], -1.5);
    for (const bytes of [
      imageUnit(ones, [n], null, axis('WAVE', 'Angstrom', 4000, 1.5)),
      imageUnit(ones, [n], null, axis('WAVE', null, 4e-7, 1.5e-10)),
      imageUnit(ones, [n], null, reversed),
      imageUnit(ones, [n], null, axis('WAVELENGTH', 'nm', 400, 0.15)),
    ]) {
      wavelengths(bytes).forEach((value, i) => expect(Math.abs(value / grid[i] - 1)).toBeLessThan(1e-12));
    }
  });
});

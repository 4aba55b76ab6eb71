// Outside source: astropy 5.2.1 and wcslib (see data/fits/SOURCE.md), and through them the FITS standard 4.0.
import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { readSpectralAxis } from '../../src/lib/formats/axis/spectral-axis';
import { readHdus, type Hdu } from '../../src/lib/formats/fits/read-hdus';
import { readHeader } from '../../src/lib/formats/fits/read-header';
import { readPixels } from '../../src/lib/formats/fits/read-image';
import { readTable } from '../../src/lib/formats/fits/read-table';
import { inflateGzip } from '../../src/lib/formats/inflate';
import type { Problem } from '../../src/lib/domain/input-problem';

interface ExpectedColumn {
  name: string;
  unit: string | null;
  text?: string[];
  cells?: (number | null)[][];
}
interface ExpectedHdu {
  kind: string;
  name: string;
  rows?: number;
  columns?: ExpectedColumn[];
  axes?: number[];
  pixels?: (number | null)[];
  sum?: number;
}
interface ExpectedAxis {
  key: string;
  ctype: string;
  pixels: number[];
  count: number;
  metres: number[];
}

const folder = new URL('./data/fits/', import.meta.url);
const load = (name: string) => new Uint8Array(readFileSync(new URL(name, folder)));
const expected = JSON.parse(readFileSync(new URL('expected-astropy.json', folder), 'utf8')) as {
  files: Record<string, ExpectedHdu[]>;
  axes: Record<string, ExpectedAxis[]>;
};

function open(name: string): { hdus: Hdu[]; problems: Problem[] } {
  const problems: Problem[] = [];
  const bytes = name.endsWith('.gz') ? inflateGzip(load(name), { file: name }) : load(name);
  return { hdus: readHdus(bytes, name, problems), problems };
}

/** Single-precision and scaled values agree to their last digit. */
function expectClose(values: ArrayLike<number>, wanted: (number | null)[]): void {
  wanted.forEach((value, i) => {
    if (value === null) expect(values[i]).toBeNaN();
    else expect(Math.abs(values[i] - value)).toBeLessThanOrEqual(1e-6 * Math.abs(value) + 1e-300);
  });
}

describe.each(Object.entries(expected.files))('%s reads as astropy reads it', (name, wanted) => {
  const { hdus, problems } = open(name);

  it('has the same units', () => {
    expect(problems).toEqual([]);
    expect(hdus.map((hdu) => hdu.name)).toEqual(wanted.map((hdu) => hdu.name));
  });

  wanted.forEach((entry, i) => {
    if (entry.pixels) {
      it(`has the same pixels in HDU ${i}`, () => {
        expect(hdus[i].axes).toEqual(entry.axes);
        const pixels = readPixels(
          hdus[i],
          0,
          entry.axes!.reduce((product, length) => product * length),
        );
        expectClose(pixels, entry.pixels!);
        const sum = pixels.reduce((total, value) => total + (Number.isNaN(value) ? 0 : value), 0);
        expect(Math.abs(sum - entry.sum!)).toBeLessThanOrEqual(1e-6 * Math.abs(entry.sum!));
      });
    }
    if (entry.columns) {
      it(`has the same columns in HDU ${i}`, () => {
        const table = readTable(hdus[i], name);
        expect(table.rows).toBe(entry.rows);
        expect(table.columns.map((column) => column.name)).toEqual(entry.columns!.map((column) => column.name));
        entry.columns!.forEach((column, c) => {
          const ours = table.columns[c];
          expect(ours.unit).toBe(column.unit);
          column.text?.forEach((text, row) => expect(ours.text(row) ?? '').toBe(text));
          column.cells?.forEach((cell, row) => {
            const values = ours.cell(row);
            expect(values.length).toBeGreaterThanOrEqual(cell.length);
            expectClose(values, cell);
          });
        });
      });
    }
  });
});

describe.each(Object.entries(expected.axes))('the spectral axes of %s agree with wcslib', (name, axes) => {
  // Bare cards without END.
  const text = `${readFileSync(new URL(name, folder), 'latin1').replaceAll('\n', '')}${'END'.padEnd(80)}`;
  const bytes = new TextEncoder().encode(text.padEnd(Math.ceil(text.length / 2880) * 2880));
  const { cards } = readHeader(bytes, 0, null, { file: name });

  it.each(axes.map((axis) => [axis.ctype, axis.key, axis] as const))('%s %s', (_, key, axis) => {
    const names = {
      axis: 1,
      ctype: `CTYPE1${key}`,
      cunit: `CUNIT1${key}`,
      crval: `CRVAL1${key}`,
      crpix: `CRPIX1${key}`,
    };
    const read = readSpectralAxis(cards, { ...names, length: axis.count, cdelt: [`CDELT1${key}`] }, { file: name });
    axis.pixels.forEach((pixel, i) => {
      const metres = read.values[pixel - 1] * read.scaleAngstrom * 1e-10;
      // 1e-9 is 0.3 m/s; for energies wcslib carries constants from before the SI of 2019, 9e-7 apart.
      expect(Math.abs(metres / axis.metres[i] - 1)).toBeLessThan(axis.ctype.startsWith('ENER') ? 1e-6 : 1e-9);
    });
  });
});

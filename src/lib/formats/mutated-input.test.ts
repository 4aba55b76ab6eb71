import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { gzipSync } from 'fflate';
import { expect, it } from 'vitest';
import { InputProblem } from '$lib/domain/input-problem';
import { toSpectrum } from '$lib/science/frames/to-spectrum';
import { joinBytes } from './fits/write-header';
import { imageUnit, tableExtension } from './fits/write-table';
import { readSpectra } from './read-spectra';
import { writeSpectrumCsv, writeSpectrumEcsv, writeSpectrumFits, type WritableSpectrum } from './write-spectrum';

/** A small linear congruential generator (Numerical Recipes' constants): the cases are the same on every run. */
class Dice {
  constructor(private state: number) {}

  below(limit: number): number {
    this.state = (Math.imul(this.state, 1664525) + 1013904223) >>> 0;
    return Math.floor((this.state / 2 ** 32) * limit);
  }

  pick<T>(items: readonly T[]): T {
    return items[this.below(items.length)];
  }
}

const n = 48;
const spectrum: WritableSpectrum = {
  name: 'CHO 17',
  wavelength: Float64Array.from({ length: n }, (_, i) => 4000 + 1.25 * i),
  medium: 'air',
  specsys: 'TOPOCENT',
  flux: Float64Array.from({ length: n }, (_, i) => 1 + 0.1 * (i % 9)),
  error: new Float64Array(n).fill(0.25),
  fluxUnit: '1e-17 erg s-1 cm-2 Angstrom-1',
  sky: Float64Array.from({ length: n }, (_, i) => 5 + Math.sin(i)),
  mask: new Uint8Array(n),
  raDegrees: 143.15951,
  decDegrees: -28.76975,
  dateObs: '2017-03-31T10:04:41.000',
  exposureSeconds: 900,
  observatoryMetres: [-4090053.34, 2496579.22, -4196270.98],
};
const encoder = new TextEncoder();
const stack = imageUnit(new Float64Array(n * 4).fill(1), [n, 4], null, [
  { keyword: 'CTYPE1', value: 'WAVE-LOG' },
  { keyword: 'CUNIT1', value: 'um' },
  { keyword: 'CRPIX1', value: 1 },
  { keyword: 'CRVAL1', value: 0.5 },
  { keyword: 'CD1_1', value: 1e-4 },
]);
const vectors = tableExtension(
  [
    { name: 'WAVE', form: 'D', repeat: n, values: spectrum.wavelength, unit: 'Angstrom' },
    { name: 'FLUX', form: 'E', repeat: n, values: spectrum.flux },
    { name: 'IVAR', form: 'E', repeat: n, values: spectrum.flux },
  ],
  1,
  [],
);
const seeds = [
  writeSpectrumFits(spectrum),
  joinBytes([stack, imageUnit(new Float64Array(n * 4).fill(2), [n, 4], 'ERROR', []), vectors]),
  encoder.encode(writeSpectrumCsv(spectrum)),
  encoder.encode(writeSpectrumEcsv(spectrum)),
  encoder.encode(writeSpectrumCsv(spectrum).replaceAll(',', '  ')),
  gzipSync(writeSpectrumFits(spectrum)),
  ...[
    'made-table-tiled.fits',
    'compressed-rice-dither2.fits',
    'compressed-gzip2-int16.fits',
    'variable_length_table.fits',
  ].map((name) => new Uint8Array(readFileSync(join('tests/reference/data/fits', name)))),
];

/** Values that have hurt readers: sizes, signs, units, types, quotes. */
const HOSTILE = [
  '                  -1', '          9999999999', '9007199254740993', '4294967296', '                   0', '1E308', 'NaN', "'",
  "'WAVE-TAB'", "'AWAV-F2W'", "'1PD(9)'", "'999999999D'", "'0E      '", "'Hz'", "'log(m)'", '&', '"', '{', '[', ': ', '\u0000',
  'T', '                 999', '\n\n', ',,,,', '-', '1e999', "'P'", "'QJ'", 'END', 'SIMPLE', 'XTENSION',
]; // prettier-ignore

function mutate(seed: Uint8Array, dice: Dice): Uint8Array {
  let bytes = seed.slice();
  for (let times = 1 + dice.below(4); times > 0; times--) {
    const at = dice.below(bytes.length);
    const kind = dice.below(6);
    if (kind === 0) bytes[at] = dice.below(256);
    else if (kind === 1) bytes[at] ^= 1 << dice.below(8);
    else if (kind === 2) bytes = bytes.slice(0, Math.max(1, at));
    else if (kind === 3) bytes.set(encoder.encode(dice.pick(HOSTILE)).subarray(0, bytes.length - at), at);
    else if (kind === 4) {
      // A value at the place where a card has it.
      const card = Math.floor(at / 80) * 80 + 10;
      bytes.set(
        encoder.encode(dice.pick(HOSTILE).padEnd(20)).subarray(0, Math.max(0, bytes.length - card)),
        Math.min(card, bytes.length),
      );
    } else {
      const from = dice.below(bytes.length);
      bytes.copyWithin(at, from, from + 1 + dice.below(400));
    }
  }
  return bytes;
}

/** Reads a case; gives how many values came out, or throws with what is wrong. */
function valuesRead(bytes: Uint8Array): number {
  const { spectra, problems } = readSpectra(bytes, 'case');
  if (spectra.length + problems.length === 0) throw new Error('neither spectrum nor problem');
  if (problems.some(({ what, where, mend }) => !what || !where || !mend)) throw new Error('a problem without words');
  let count = 0;
  for (const raw of spectra) {
    count += raw.wavelength.length;
    try {
      const ready = toSpectrum(raw);
      count += ready.wavelength.length;
      if (ready.wavelength.some((value, i) => i > 0 && !(value > ready.wavelength[i - 1])))
        throw new Error('unordered');
      if (!ready.flux.every(Number.isFinite) || !ready.lsfSigma.every((sigma) => sigma > 0))
        throw new Error('not finite');
    } catch (error) {
      if (!(error instanceof InputProblem)) throw error;
    }
  }
  return count;
}

it('reads 3,000 mutated files without throwing, hanging or growing beyond their size', () => {
  const dice = new Dice(20261201);
  for (let i = 0; i < 3000; i++) {
    const bytes = mutate(seeds[i % seeds.length], dice);
    let count = 0;
    try {
      count = valuesRead(bytes);
    } catch (error) {
      throw new Error(`case ${i}`, { cause: error });
    }
    expect(count).toBeLessThanOrEqual(8 * Math.max(bytes.length, 40_000));
  }
}, 60_000);

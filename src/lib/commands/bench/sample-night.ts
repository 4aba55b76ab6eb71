import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { parse } from 'csv-parse/sync';
import { readSpectra } from '$lib/formats/read-spectra';
import { toSpectrum } from '$lib/science/frames/to-spectrum';
import { measureSpectrum } from '$lib/science/measure/measure-spectrum';
import { judge } from './judge';
import type { KnownAnswer, Outcome } from './outcome';

interface TruthRow {
  file: string;
  object: string;
  type: string;
  regime: string;
  has_redshift: string;
  z: string;
  z_sys: string;
  z2: string;
  broad: string;
  best_sn: string;
  has_sn7: string;
  has_two_sn4: string;
  crlb_z: string;
}

const number = (text: string) => (text === '' ? null : Number(text));

function knownFromRow(row: TruthRow): KnownAnswer {
  const redshift = row.has_redshift === '1' ? number(row.z) : null;
  return {
    redshift,
    redshiftSystemic: redshift === null ? null : number(row.z_sys),
    secondRedshift: number(row.z2),
    broad: row.broad === '1' || row.type === 'passive',
    hasEmission: redshift !== null && Number(row.best_sn) > 0,
    bestSignalToNoise: Number(row.best_sn),
    featuresOverFour: row.has_two_sn4 === '1' ? 2 : row.has_sn7 === '1' ? 1 : 0,
    redshiftBound: number(row.crlb_z),
    strongestLine: null,
    declaredErrorFactor: 1,
    artefacts: [`${row.object} (${row.regime}, ${row.type})`],
  };
}

/**
 * Measures the files of a folder that holds `truth.csv` (one row a file) and scores them as the simulated ones; a second simulator's
 * spectra keep the first one honest.
 */
export function scoreSampleNight(folder: string): { outcomes: Outcome[]; failures: string[] } {
  const rows = parse(readFileSync(join(folder, 'truth.csv')), { columns: true }) as TruthRow[];
  const there = new Set(readdirSync(folder));
  const outcomes: Outcome[] = [];
  const failures: string[] = [];
  rows.forEach((row, i) => {
    if (!there.has(row.file)) {
      failures.push(`${row.file}: listed in truth.csv but not in the folder`);
      return;
    }
    try {
      const { spectra } = readSpectra(readFileSync(join(folder, row.file)), row.file);
      const spectrum = toSpectrum(spectra[0]);
      const start = performance.now();
      const measurement = measureSpectrum(spectrum);
      const group = row.has_redshift === '1' ? 'sample' : row.type.startsWith('star') ? 'star' : 'empty sky';
      outcomes.push(judge(group, i, knownFromRow(row), measurement, performance.now() - start));
    } catch (error) {
      failures.push(`${row.file}: ${error instanceof Error ? error.message : String(error)}`);
    }
  });
  return { outcomes, failures };
}

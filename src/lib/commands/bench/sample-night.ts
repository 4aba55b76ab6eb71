import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { parse } from 'csv-parse/sync';
import { readSpectra } from '$lib/formats/read-spectra';
import { toSpectrum } from '$lib/science/frames/to-spectrum';
import { measureSpectrum } from '$lib/science/measure/measure-spectrum';
import type { TruthLine } from '$lib/science/simulate/truth';
import { judge, nameFeature, strongestFeature } from './judge';
import type { Group, KnownAnswer, Outcome } from './outcome';

/** Columns of `truth.csv` that are read; its README describes them all. */
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
  systematics: string;
  lines: string;
}

interface TruthRowLine {
  line: string;
  wavelengthRest: number;
  flux: number;
  sn: number;
  fwhmKms: number;
  ewRest: number | null;
  broad: boolean;
  coverage: number;
}

/** Fluxes of `truth.csv` are in this many erg/s/cm2. */
const TRUTH_FLUX_CGS = 1e-17;

const number = (text: string) => (text === '' ? null : Number(text));

function groupOf({ type, regime }: TruthRow): Group {
  if (type === 'blank') return 'empty sky';
  if (type.startsWith('star')) return 'star';
  if (type === 'passive') return 'passive';
  if (type === 'quasar') return 'quasar';
  if (regime === 'precision') return 'precision';
  if (regime === 'faint') return 'faint lines';
  if (regime === 'galaxy_single') return 'single line';
  if (type.startsWith('lae')) return 'lyman-alpha emitter';
  return type === 'galaxy_agn' ? 'active nucleus' : 'star-forming';
}

/** Lines of a row; sums of blends are left out, since their members are listed too. */
function linesOf(row: TruthRow, redshift: number | null): TruthLine[] {
  const lines = JSON.parse(row.lines || '[]') as TruthRowLine[];
  return lines
    .filter(({ line }) => !line.endsWith('sum'))
    .map((line) => ({
      line: nameFeature(line.wavelengthRest, 0),
      wavelengthRest: line.wavelengthRest,
      wavelengthObserved: line.wavelengthRest * (1 + (redshift ?? 0)),
      flux: line.flux,
      signalToNoise: line.sn,
      fwhmKms: line.fwhmKms,
      equivalentWidthRest: line.ewRest,
      broad: line.broad,
      coverage: line.coverage,
      // truth.csv does not say
      transmission: 1,
      object: 0,
    }));
}

function knownFromRow(row: TruthRow, group: Group, lines: readonly TruthLine[]): KnownAnswer {
  const redshift = row.has_redshift === '1' && group !== 'star' ? number(row.z) : null;
  return {
    redshift,
    redshiftSystemic: redshift === null ? null : number(row.z_sys),
    secondRedshift: number(row.z2),
    broad: row.broad === '1' || group === 'passive',
    hasEmission: redshift !== null && Number(row.best_sn) > 0,
    bestSignalToNoise: Number(row.best_sn),
    featuresOverFour: row.has_two_sn4 === '1' ? 2 : Number(row.best_sn) >= 4 ? 1 : 0,
    redshiftBound: number(row.crlb_z),
    strongestLine: strongestFeature(lines),
    declaredErrorFactor: 1,
    artefacts: row.systematics.split(';').filter(Boolean),
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
  rows.forEach((row, seed) => {
    if (!there.has(row.file)) {
      failures.push(`${row.file}: listed in truth.csv but not in the folder`);
      return;
    }
    try {
      const { spectra, problems } = readSpectra(readFileSync(join(folder, row.file)), row.file);
      if (spectra.length === 0) throw new Error(problems[0]?.what ?? 'no spectrum');
      const spectrum = toSpectrum(spectra[0]);
      const start = performance.now();
      const measurement = measureSpectrum(spectrum);
      const milliseconds = performance.now() - start;
      const group = groupOf(row);
      const lines = linesOf(row, number(row.z));
      const label = `${row.object} (${row.regime}, ${row.type})`;
      const scale = TRUTH_FLUX_CGS / (spectrum.fluxScaleCgs ?? TRUTH_FLUX_CGS);
      const known = knownFromRow(row, group, lines);
      outcomes.push(judge({ group, seed, label }, known, measurement, milliseconds, lines, scale));
    } catch (error) {
      failures.push(`${row.file}: ${error instanceof Error ? error.message : String(error)}`);
    }
  });
  return { outcomes, failures };
}

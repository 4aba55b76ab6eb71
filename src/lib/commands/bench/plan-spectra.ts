import type { Group } from './outcome';

/**
 * Share of each group in a run, chosen so that 13,000 spectra fill every row of the bar: 3,000 nulls and more, 800 pulls, 200 spectra for
 * the bound, 3,000 answers for the calibration.
 */
const SHARES: Record<Group, number> = {
  'star-forming': 0.16,
  precision: 0.1,
  'active nucleus': 0.07,
  'shock-like': 0.03,
  'lyman-alpha emitter': 0.07,
  quasar: 0.07,
  'faint lines': 0.06,
  'single line': 0.06,
  passive: 0.05,
  star: 0.07,
  'empty sky': 0.08,
  'pure noise': 0.05,
  'featureless continuum': 0.05,
  'two redshifts': 0.03,
  'sign-inverted': 0.05,
};

/** How a file might write a spectrum, for the bias by flavour. */
export const FLAVOURS = [
  'vacuum, ångström',
  'air, ångström',
  'vacuum, nm, reversed',
  'air, µm',
  'topocentric, vacuum',
  'topocentric, air, reversed',
  'half a pixel on, logarithmic',
] as const;
export type Flavour = (typeof FLAVOURS)[number];

/** A run of seeds for one thread. */
export type BenchTask =
  | { kind: 'group'; group: Group; seed: number; from: number; to: number }
  | { kind: 'flavour'; flavour: Flavour; seed: number; from: number; to: number };

const BATCH = 10;

function batches(count: number, of: (from: number, to: number) => BenchTask): BenchTask[] {
  return Array.from({ length: Math.ceil(count / BATCH) }, (_, b) => of(b * BATCH, Math.min(count, (b + 1) * BATCH)));
}

/** Tasks for about `count` spectra, groups mixed so that threads finish together, and `perFlavour` strong spectra for each flavour. */
export function planSpectra(count: number, seed: number, perFlavour: number): BenchTask[] {
  const groups = Object.entries(SHARES) as [Group, number][];
  return [
    ...groups.flatMap(([group, share]) =>
      batches(Math.round(share * count), (from, to) => ({ kind: 'group', group, seed, from, to })),
    ),
    ...FLAVOURS.flatMap((flavour) => batches(perFlavour, (from, to) => ({ kind: 'flavour', flavour, seed, from, to }))),
  ];
}

/** Seed of one spectrum: runs of other seeds share none. */
export function spectrumSeed(runSeed: number, index: number): number {
  return runSeed * 1_000_003 + index;
}

import { DOUBLET_RATIO_BOUNDS, EMISSION_LINES, lineByName, type LineEntry } from '../../constants/lines';

/** One line of a component; its flux is the component's amplitude times `share`. */
export interface ComponentMember {
  entry: LineEntry;
  rest: number;
  share: number;
}

/** A set of lines with one amplitude: a single line, or lines whose ratio atomic physics fixes. */
export interface LineComponent {
  /** Name of the strongest member, which the amplitude belongs to. */
  name: string;
  members: ComponentMember[];
  /** Which width parameter it follows: 0 narrow, 1 broad. */
  width: 0 | 1;
  /** A drop of the continuum below the first member's wavelength instead of lines. */
  step?: boolean;
  /** Velocity sigma that is not fitted, km/s. */
  fixedSigmaKms?: number;
  /** Helps the fit and is no emission line: left out of every list of lines. */
  auxiliary?: boolean;
}

/** A prior on the ratio of two components of a density- or opacity-sensitive doublet. */
export interface RatioPrior {
  numerator: string;
  denominator: string;
  mean: number;
  sigma: number;
  low: number;
  high: number;
}

const oxygen = DOUBLET_RATIO_BOUNDS.oxygenTwo;
const sulphur = DOUBLET_RATIO_BOUNDS.sulphurTwo;

/** Doublets whose unresolved centroid would else float: typical densities of H II regions, within the physical limits. */
export const RATIO_PRIORS: readonly RatioPrior[] = [
  { numerator: '[O II] 3730', denominator: '[O II] 3727', mean: 1.2, sigma: 0.3, low: oxygen.low, high: oxygen.high },
  { numerator: '[S II] 6718', denominator: '[S II] 6733', mean: 1.2, sigma: 0.3, low: sulphur.low, high: sulphur.high },
  { numerator: 'Mg II 2796', denominator: 'Mg II 2804', mean: 1.5, sigma: 0.3, low: 1, high: 2 },
  { numerator: 'C IV 1548', denominator: 'C IV 1551', mean: 1.5, sigma: 0.3, low: 1, high: 2 },
  { numerator: '[C III] 1907', denominator: 'C III] 1909', mean: 1.4, sigma: 0.25, low: 0.2, high: 1.6 },
];

const tied = new Map<string, LineEntry[]>();
for (const line of EMISSION_LINES) {
  if (line.tiedTo) tied.set(line.tiedTo.name, [...(tied.get(line.tiedTo.name) ?? []), line]);
}

/** The component of a line with every weaker line tied to it. */
export function componentOf(name: string, width: 0 | 1 = 0): LineComponent {
  const entry = lineByName(name);
  const members = [{ entry, rest: entry.wavelengthVacuum, share: 1 }];
  for (const weaker of tied.get(name) ?? []) {
    members.push({ entry: weaker, rest: weaker.wavelengthVacuum, share: 1 / weaker.tiedTo!.strongerOverThis });
  }
  return { name, members, width };
}

const CORE_NAMES = [
  'Lyman-alpha 1216',
  'C IV 1548',
  'C IV 1551',
  'He II 1640',
  '[C III] 1907',
  'C III] 1909',
  'Mg II 2796',
  'Mg II 2804',
  '[Ne V] 3427',
  '[O II] 3727',
  '[O II] 3730',
  '[Ne III] 3870',
  'H-delta 4103',
  'H-gamma 4342',
  'H-beta 4863',
  '[O III] 5008',
  'He I 5877',
  '[O I] 6302',
  'H-alpha 6565',
  '[N II] 6585',
  '[S II] 6718',
  '[S II] 6733',
  '[Ar III] 7138',
  '[S III] 9533',
  'He I 10833',
  'Paschen-beta 12822',
  'Paschen-alpha 18756',
];

/** Narrow lines that decide a redshift. */
export const CORE_COMPONENTS: readonly LineComponent[] = CORE_NAMES.map((name) => componentOf(name));

const MORE_NAMES = [
  'N V 1239',
  'N V 1243',
  'Si IV 1394',
  'Si IV 1403',
  'He II 3204',
  'H-eta 3836',
  'H-zeta 3890',
  'H-epsilon 3971',
  '[S II] 4070',
  '[O III] 4364',
  'He I 4473',
  'He II 4687',
  '[N II] 5756',
  '[S III] 6314',
  'He I 6680',
  'He I 7067',
  '[O II] 7322',
  '[O II] 7333',
  'Paschen-delta 10052',
  'Paschen-gamma 10941',
];

/** Narrow lines fitted for the answer that is reported. */
export const FULL_COMPONENTS: readonly LineComponent[] = [
  ...CORE_COMPONENTS,
  ...MORE_NAMES.map((name) => componentOf(name)),
];

const pair = (a: string, b: string, width: 0 | 1): LineComponent => {
  const first = lineByName(a);
  const second = lineByName(b);
  return {
    name: a,
    width,
    members: [
      { entry: first, rest: first.wavelengthVacuum, share: 0.5 },
      { entry: second, rest: second.wavelengthVacuum, share: 0.5 },
    ],
  };
};

/** Broad permitted lines of quasars; doublets count as one broad line. */
export const BROAD_COMPONENTS: readonly LineComponent[] = [
  // The forest eats the continuum and the blue half of Lyman-alpha: a step, and a narrower core.
  { ...componentOf('Lyman-alpha 1216', 1), name: 'Lyman-alpha step', step: true, auxiliary: true },
  componentOf('Lyman-alpha 1216', 0),
  componentOf('Lyman-alpha 1216', 1),
  pair('N V 1239', 'N V 1243', 1),
  pair('Si IV 1394', 'Si IV 1403', 1),
  pair('C IV 1548', 'C IV 1551', 1),
  componentOf('He II 1640', 1),
  pair('Al III 1855', 'Al III 1863', 1),
  componentOf('Si III] 1892', 1),
  componentOf('C III] 1909', 1),
  pair('Mg II 2796', 'Mg II 2804', 1),
  componentOf('H-delta 4103', 1),
  componentOf('H-gamma 4342', 1),
  componentOf('H-beta 4863', 1),
  componentOf('H-alpha 6565', 1),
  componentOf('Paschen-beta 12822', 1),
];

/** Velocity sigma of a component at given widths, km/s. */
export function sigmaOf(component: LineComponent, sigmaKms: readonly [number, number]): number {
  return component.fixedSigmaKms ?? sigmaKms[component.width];
}

/** Stellar absorption under the Balmer lines, relative equivalent widths (common practice; H-alpha is shallower). */
const STELLAR_BALMER: readonly (readonly [string, number])[] = [
  ['H-alpha 6565', 0.7],
  ['H-beta 4863', 1],
  ['H-gamma 4342', 1],
  ['H-delta 4103', 1],
];
/** Velocity sigma of stellar Balmer absorption, km/s: pressure broadening of A and F stars. */
const STELLAR_SIGMA_KMS = 420;

/**
 * Stellar absorption under the Balmer lines as one component of negative lines with a common equivalent width.
 *
 * @param level continuum at an observed wavelength
 * @param stretch 1 + z
 * @returns null where the continuum is not positive under every line
 */
export function stellarBalmer(level: (wavelength: number) => number, stretch: number): LineComponent | null {
  const members = STELLAR_BALMER.map(([name, width]) => {
    const entry = lineByName(name);
    return { entry, rest: entry.wavelengthVacuum, share: -width * level(entry.wavelengthVacuum * stretch) };
  });
  const deepest = Math.min(...members.map((member) => member.share));
  if (!(deepest < 0)) return null;
  return {
    name: 'stellar Balmer absorption',
    members: members.map((member) => ({ ...member, share: Math.min(0, -member.share / deepest) })),
    width: 0,
    fixedSigmaKms: STELLAR_SIGMA_KMS,
    auxiliary: true,
  };
}

import type { LineEntry, LineKind } from './line-entry';
import { HYDROGEN_LINES, hydrogenLevelEnergyEv } from './lines-hydrogen';
import { ABSORPTION_LINES, ION_LINES } from './lines-ions';

export type { LineEntry, LineKind };
export { ABSORPTION_LINES, hydrogenLevelEnergyEv };

/** Version of the line list; part of every measurement. Raise it with any change of a wavelength or ratio. */
export const LINE_LIST_VERSION = '1';

/** Every emission line of the list, increasing vacuum wavelength. */
export const EMISSION_LINES: readonly LineEntry[] = [...HYDROGEN_LINES, ...ION_LINES].sort(
  (a, b) => a.wavelengthVacuum - b.wavelengthVacuum,
);

const byName = new Map([...EMISSION_LINES, ...ABSORPTION_LINES].map((line) => [line.name, line]));

/**
 * The entry of a line.
 *
 * @param name e.g. `[O III] 5008`
 * @throws RangeError where the list has no such line
 */
export function lineByName(name: string): LineEntry {
  const line = byName.get(name);
  if (!line) throw new RangeError(`The line list has no line named "${name}".`);
  return line;
}

/** Lines a person expects to see in galaxies, active nuclei and quasars: what charts mark and limits are given for. */
export const EXPECTED_LINES: readonly LineEntry[] = [
  'Lyman-beta 1026',
  'Lyman-alpha 1216',
  'N V 1239',
  'N V 1243',
  'Si IV 1394',
  'Si IV 1403',
  'C IV 1548',
  'C IV 1551',
  'He II 1640',
  '[C III] 1907',
  'C III] 1909',
  'Mg II 2796',
  'Mg II 2804',
  '[Ne V] 3347',
  '[Ne V] 3427',
  '[O II] 3727',
  '[O II] 3730',
  '[Ne III] 3870',
  'H-zeta 3890',
  '[Ne III] 3969',
  'H-epsilon 3971',
  'H-delta 4103',
  'H-gamma 4342',
  '[O III] 4364',
  'He II 4687',
  'H-beta 4863',
  '[O III] 4960',
  '[O III] 5008',
  'He I 5877',
  '[O I] 6302',
  '[O I] 6366',
  '[N II] 6550',
  'H-alpha 6565',
  '[N II] 6585',
  'He I 6680',
  '[S II] 6718',
  '[S II] 6733',
  '[Ar III] 7138',
  '[S III] 9071',
  '[S III] 9533',
  'Paschen-gamma 10941',
  'He I 10833',
  'Paschen-beta 12822',
  'Paschen-alpha 18756',
]
  .map(lineByName)
  .sort((a, b) => a.wavelengthVacuum - b.wavelengthVacuum);

/** Ratio bounds of density-sensitive doublets, longer over shorter wavelength. */
export const DOUBLET_RATIO_BOUNDS = {
  /** [O II] 3730 / 3727: high- and low-density limits (Pradhan et al. 2006, MNRAS 366, L6). */
  oxygenTwo: { low: 0.35, high: 1.5, typical: 1.35 },
  /** [S II] 6718 / 6733 (Osterbrock & Ferland 2006, figure 5.8; from memory). Given here as shorter over longer. */
  sulphurTwo: { low: 0.44, high: 1.44, typical: 1.3 },
} as const;

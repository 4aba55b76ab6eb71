import { lineEntry, type LineEntry } from './line-entry';
import { ELECTRONVOLT_JOULE, PLANCK_JOULE_SECOND, SPEED_OF_LIGHT_KMS } from './physical';

/**
 * Energies of the hydrogen levels n = 1 to 20 above the ground state, 1/cm: statistical means over fine structure.
 * Source: NIST Atomic Spectra Database, energy levels of H I.
 */
const LEVELS_PER_CM: readonly number[] = [
  NaN,
  0,
  82259.158,
  97492.304,
  102823.904,
  105291.657,
  106632.1681,
  107440.4508,
  107965.0568,
  108324.7253,
  108581.9945,
  108772.3445,
  108917.1209,
  109029.7913,
  109119.1917,
  109191.3154,
  109250.3433,
  109299.2642,
  109340.2604,
  109374.9555,
  109404.5776,
];

/** Ionisation energy of hydrogen, 1/cm (NIST Handbook of Basic Atomic Spectroscopic Data). */
const IONISATION_PER_CM = 109678.7717;

const EV_PER_INVERSE_CM = (PLANCK_JOULE_SECOND * SPEED_OF_LIGHT_KMS * 1e3 * 100) / ELECTRONVOLT_JOULE;

/**
 * Energy of a hydrogen level relative to the ionisation limit, eV (negative), for the level diagram.
 *
 * @param level principal quantum number, 1 to 20; others come from the Rydberg scaling of the limit
 */
export function hydrogenLevelEnergyEv(level: number): number {
  const known = LEVELS_PER_CM[level];
  const belowLimit =
    known === undefined || Number.isNaN(known) ? IONISATION_PER_CM / level ** 2 : IONISATION_PER_CM - known;
  return -belowLimit * EV_PER_INVERSE_CM;
}

const NIST = 'NIST ASD energy levels of H I, 1e8 / (E_upper - E_lower)';

/**
 * H-alpha to H-delta: the level means weight fine structure by statistical weight, while recombination feeds the
 * d states most, which shifts the emitted centroid 0.01 to 0.02 Å to the blue (air 6562.80 against 6562.82 for H-alpha).
 * The emission centroids commonly tabulated are taken; the other choice would move redshifts by 0.6 to 1.0 km/s.
 */
const EMISSION_CENTROID =
  'emission centroid commonly tabulated, air 6562.80, 4861.325, 4340.46, 4101.73 (from memory); NIST level mean differs by 0.02 Å or less, up to 0.022 Å for H-alpha';
const EMISSION_CENTROIDS: Record<number, number> = { 3: 6564.61, 4: 4862.68, 5: 4341.68, 6: 4102.89 };

const GREEK = ['alpha', 'beta', 'gamma', 'delta', 'epsilon', 'zeta', 'eta', 'theta', 'iota', 'kappa'];

function series(name: 'Lyman' | 'Balmer' | 'Paschen', prefix: string, lower: number, last: number): LineEntry[] {
  const lines: LineEntry[] = [];
  for (let upper = lower + 1; upper <= last; upper++) {
    const centroid = lower === 2 ? EMISSION_CENTROIDS[upper] : undefined;
    const wavelength = centroid ?? 1e8 / (LEVELS_PER_CM[upper] - LEVELS_PER_CM[lower]);
    const ion = `${prefix}-${GREEK[upper - lower - 1] ?? upper}`;
    lines.push(
      lineEntry(ion, wavelength, 'permitted', centroid ? EMISSION_CENTROID : NIST, {
        series: name,
        lowerLevel: lower,
        upperLevel: upper,
      }),
    );
  }
  return lines;
}

/** Lyman, Balmer and Paschen lines up to n = 20. */
export const HYDROGEN_LINES: readonly LineEntry[] = [
  ...series('Lyman', 'Lyman', 1, 20),
  ...series('Balmer', 'H', 2, 20),
  ...series('Paschen', 'Paschen', 3, 20),
];

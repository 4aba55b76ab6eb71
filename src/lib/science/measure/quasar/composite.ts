/** A broad feature of quasars. */
export interface QuasarFeature {
  /** Rest wavelengths, vacuum ångström, with shares of the flux. */
  members: readonly (readonly [rest: number, share: number])[];
  /** Median rest equivalent width, ångström, and scatter of its natural logarithm. */
  equivalentWidth: number;
  scatter: number;
  /** Velocity sigma of its own, km/s, where it does not follow the broad lines. */
  sigmaKms?: number;
  /** Mean velocity against the systemic redshift, km/s. */
  shiftKms?: number;
}

/*
 * Equivalent widths after the composite of Vanden Berk et al. (2001, AJ 122, 549, table 2), rounded, from memory; shifts
 * after Shen et al. (2016, ApJ 831, 7), from memory; scatters by common practice (a factor of 1.5 to 2 between quasars).
 * Iron: the crowds of Fe II and Fe III as wide bumps (Vestergaard & Wilkes 2001; Boroson & Green 1992; from memory).
 */
export const QUASAR_FEATURES: readonly QuasarFeature[] = [
  { members: [[1034, 1]], equivalentWidth: 9, scatter: 0.6 },
  { members: [[1215.67, 1]], equivalentWidth: 65, scatter: 0.5, shiftKms: 200 },
  { members: [[1240.8, 1]], equivalentWidth: 18, scatter: 0.6 },
  {
    members: [
      [1304.4, 0.7],
      [1335.3, 0.3],
    ],
    equivalentWidth: 2.5,
    scatter: 0.7,
  },
  { members: [[1398.3, 1]], equivalentWidth: 8.5, scatter: 0.45, shiftKms: -200 },
  { members: [[1549.5, 1]], equivalentWidth: 30, scatter: 0.5, shiftKms: -300 },
  {
    members: [
      [1640.4, 0.6],
      [1663.5, 0.4],
    ],
    equivalentWidth: 4,
    scatter: 0.8,
  },
  {
    members: [
      [1908.7, 0.8],
      [1892.0, 0.13],
      [1858.8, 0.07],
    ],
    equivalentWidth: 21,
    scatter: 0.4,
    shiftKms: -100,
  },
  { members: [[2799.1, 1]], equivalentWidth: 32, scatter: 0.4 },
  { members: [[2080, 1]], equivalentWidth: 4, scatter: 0.9, sigmaKms: 4500 },
  {
    members: [
      [2480, 0.7],
      [2270, 0.3],
    ],
    equivalentWidth: 40,
    scatter: 0.9,
    sigmaKms: 12000,
  },
  { members: [[4102.89, 1]], equivalentWidth: 8, scatter: 0.6 },
  { members: [[4341.68, 1]], equivalentWidth: 17, scatter: 0.5 },
  { members: [[4862.68, 1]], equivalentWidth: 55, scatter: 0.45 },
  {
    members: [
      [5008.24, 0.75],
      [4960.3, 0.25],
    ],
    equivalentWidth: 12,
    scatter: 1,
    sigmaKms: 450,
  },
  {
    members: [
      [4570, 0.5],
      [5270, 0.5],
    ],
    equivalentWidth: 40,
    scatter: 0.9,
    sigmaKms: 5500,
  },
  { members: [[5877.25, 1]], equivalentWidth: 6, scatter: 0.7 },
  { members: [[6564.61, 1]], equivalentWidth: 210, scatter: 0.45 },
  {
    members: [
      [10941.1, 0.4],
      [12821.6, 0.6],
    ],
    equivalentWidth: 60,
    scatter: 0.7,
  },
  { members: [[18756.1, 1]], equivalentWidth: 100, scatter: 0.8 },
];

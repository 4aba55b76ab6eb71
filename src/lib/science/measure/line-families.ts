import type { ObjectClass } from '$lib/domain/measurement';
import type { SuspectKind } from './suspect';

/** What a kind of object's lines look like relative to each other, before noise. */
export interface LineFamily {
  name: string;
  objectClass: ObjectClass;
  /** Prior weight; they need not add up to 1. */
  weight: number;
  /** Which kind of suspect it describes. */
  kind: SuspectKind;
  /** Line name to [flux relative to the reference, scatter in natural logarithm]. */
  lines: Readonly<Record<string, readonly [number, number]>>;
}

/*
 * Ratios: hydrogen from case B (Storey & Hummer 1995) under typical dust, E(B-V) 0.1 to 0.4, whose spread is in the
 * scatters; metals from the loci of nearby galaxies in the BPT diagrams (Kauffmann et al. 2003; Kewley et al. 2001) and
 * common practice; quasars from the composite of Vanden Berk et al. (2001, AJ 122, 549, table 2; from memory). The
 * scatters are wide on purpose: they span populations, not a sample.
 */
const HYDROGEN: Record<string, readonly [number, number]> = {
  'H-alpha 6565': [1, 0.2],
  'H-beta 4863': [0.29, 0.25],
  'H-gamma 4342': [0.125, 0.35],
  'H-delta 4103': [0.063, 0.45],
  'Paschen-beta 12822': [0.07, 0.4],
  'Paschen-alpha 18756': [0.13, 0.4],
  'He I 5877': [0.038, 0.5],
  'He I 10833': [0.12, 0.9],
};

export const LINE_FAMILIES: readonly LineFamily[] = [
  {
    name: 'metal-rich star formation',
    objectClass: 'star-forming',
    weight: 1,
    kind: 'narrow',
    lines: {
      ...HYDROGEN,
      '[N II] 6585': [0.38, 0.3],
      '[S II] 6718': [0.17, 0.35],
      '[S II] 6733': [0.125, 0.35],
      '[O III] 5008': [0.13, 0.7],
      '[O II] 3727': [0.19, 0.6],
      '[O II] 3730': [0.26, 0.6],
      '[O I] 6302': [0.03, 0.6],
      '[Ne III] 3870': [0.01, 0.8],
      '[S III] 9533': [0.17, 0.5],
      '[Ar III] 7138': [0.02, 0.6],
    },
  },
  {
    name: 'typical star formation',
    objectClass: 'star-forming',
    weight: 1.2,
    kind: 'narrow',
    lines: {
      ...HYDROGEN,
      '[N II] 6585': [0.2, 0.4],
      '[S II] 6718': [0.18, 0.35],
      '[S II] 6733': [0.135, 0.35],
      '[O III] 5008': [0.45, 0.55],
      '[O II] 3727': [0.33, 0.5],
      '[O II] 3730': [0.44, 0.5],
      '[O I] 6302': [0.03, 0.6],
      '[Ne III] 3870': [0.035, 0.7],
      'Mg II 2796': [0.02, 1],
      'Mg II 2804': [0.012, 1],
      '[S III] 9533': [0.2, 0.5],
      '[Ar III] 7138': [0.03, 0.6],
    },
  },
  {
    name: 'metal-poor star formation',
    objectClass: 'star-forming',
    weight: 1,
    kind: 'narrow',
    lines: {
      ...HYDROGEN,
      '[N II] 6585': [0.04, 0.8],
      '[S II] 6718': [0.07, 0.6],
      '[S II] 6733': [0.052, 0.6],
      '[O III] 5008': [1.6, 0.4],
      '[O II] 3727': [0.25, 0.7],
      '[O II] 3730': [0.33, 0.7],
      '[O I] 6302': [0.015, 0.7],
      '[Ne III] 3870': [0.12, 0.5],
      'He II 1640': [0.02, 1],
      '[C III] 1907': [0.05, 1],
      'C III] 1909': [0.035, 1],
      'C IV 1548': [0.02, 1.2],
      'C IV 1551': [0.015, 1.2],
      'Mg II 2796': [0.03, 1],
      'Mg II 2804': [0.02, 1],
      '[S III] 9533': [0.1, 0.6],
      '[Ar III] 7138': [0.02, 0.6],
    },
  },
  {
    name: 'narrow-line active nucleus',
    objectClass: 'active nucleus',
    weight: 0.35,
    kind: 'narrow',
    lines: {
      ...HYDROGEN,
      '[N II] 6585': [0.9, 0.4],
      '[S II] 6718': [0.27, 0.4],
      '[S II] 6733': [0.24, 0.4],
      '[O III] 5008': [2.4, 0.6],
      '[O II] 3727': [0.45, 0.6],
      '[O II] 3730': [0.5, 0.6],
      '[O I] 6302': [0.13, 0.6],
      '[Ne III] 3870': [0.2, 0.6],
      '[Ne V] 3427': [0.12, 1],
      'He II 1640': [0.15, 1],
      'C IV 1548': [0.15, 1],
      'C IV 1551': [0.1, 1],
      '[C III] 1907': [0.1, 1],
      'C III] 1909': [0.1, 1],
      'Mg II 2796': [0.05, 1],
      'Mg II 2804': [0.03, 1],
      '[S III] 9533': [0.3, 0.6],
    },
  },
  {
    name: 'shocks or weak nucleus',
    objectClass: 'active nucleus',
    weight: 0.25,
    kind: 'narrow',
    lines: {
      ...HYDROGEN,
      '[N II] 6585': [1.1, 0.4],
      '[S II] 6718': [0.5, 0.4],
      '[S II] 6733': [0.42, 0.4],
      '[O III] 5008': [0.55, 0.6],
      '[O II] 3727': [0.6, 0.6],
      '[O II] 3730': [0.75, 0.6],
      '[O I] 6302': [0.25, 0.6],
      '[Ne III] 3870': [0.08, 0.8],
    },
  },
  {
    name: 'Lyman-alpha emitter',
    objectClass: 'lyman-alpha emitter',
    weight: 1,
    kind: 'lyman',
    lines: {
      'Lyman-alpha 1216': [1, 0.3],
      'C IV 1548': [0.02, 1],
      'C IV 1551': [0.015, 1],
      'He II 1640': [0.02, 1],
      '[C III] 1907': [0.04, 1],
      'C III] 1909': [0.028, 1],
      '[O II] 3727': [0.1, 1],
      '[O II] 3730': [0.13, 1],
      'Mg II 2796': [0.01, 1],
      'Mg II 2804': [0.007, 1],
    },
  },
  {
    name: 'quasar',
    objectClass: 'quasar',
    weight: 0.3,
    kind: 'broad',
    lines: {
      'Lyman-alpha 1216': [1, 0.7],
      'N V 1239': [0.2, 0.6],
      'Si IV 1394': [0.09, 0.45],
      'C IV 1548': [0.4, 0.6],
      'He II 1640': [0.03, 0.4],
      'Al III 1855': [0.02, 0.35],
      'Si III] 1892': [0.03, 0.35],
      'C III] 1909': [0.15, 0.5],
      'Mg II 2796': [0.16, 0.5],
      'H-delta 4103': [0.03, 0.45],
      'H-gamma 4342': [0.06, 0.4],
      'H-beta 4863': [0.12, 0.5],
      'H-alpha 6565': [0.45, 0.5],
      'Paschen-beta 12822': [0.05, 0.7],
    },
  },
];

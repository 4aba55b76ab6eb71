import type { ReleaseRow } from './release';

/** What a program needs to know of one column of a table. */
export interface TableColumn {
  name: string;
  datatype: 'char' | 'int' | 'double';
  /** VOUnits 1.0; null for words, counts and pure numbers. */
  unit: string | null;
  /** UCD1+, words of the IVOA's controlled vocabulary. */
  ucd: string;
  description: string;
}

/** A column of every release, and the key of `ReleaseRow` that fills it. */
export interface ReleaseColumn extends TableColumn {
  key: keyof ReleaseRow;
  /** Smallest VERB of a cone search (Simple Cone Search 1.03, section 2) that shows the column. */
  verbosity: 1 | 2 | 3;
}

const LINE_FLUX = '10**-17 erg.s**-1.cm**-2';

function lineFlux(
  name: string,
  key: keyof ReleaseRow,
  errorKey: keyof ReleaseRow,
  word: string,
  line: string,
  errorRemark = '',
): ReleaseColumn[] {
  const shared = { datatype: 'double', unit: LINE_FLUX } as const;
  return [
    {
      ...shared,
      name,
      key,
      ucd: `phot.flux;${word}`,
      verbosity: 2,
      description: `flux of ${line}, not corrected for dust; empty where the spectrum has relative flux or no such line`,
    },
    {
      ...shared,
      name: `${name}_error`,
      key: errorKey,
      ucd: `stat.error;phot.flux;${word}`,
      verbosity: 3,
      description: `standard error of the flux of ${line}${errorRemark}`,
    },
  ];
}

const plain = { unit: null } as const;

/** The columns of a release, in their published order. The names are those of JSON, CSV and VOTable alike. */
export const RELEASE_COLUMNS: readonly ReleaseColumn[] = [
  {
    ...plain,
    name: 'row',
    key: 'row',
    datatype: 'int',
    ucd: 'meta.record',
    verbosity: 3,
    description: 'number of the row in this release, from 1 in the order of right ascension',
  },
  {
    ...plain,
    name: 'target',
    key: 'name',
    datatype: 'char',
    ucd: 'meta.id;meta.main',
    verbosity: 1,
    description: 'name of the target, once in a release',
  },
  {
    name: 'ra',
    key: 'ra',
    datatype: 'double',
    unit: 'deg',
    ucd: 'pos.eq.ra;meta.main',
    verbosity: 1,
    description: 'right ascension, ICRS',
  },
  {
    name: 'dec',
    key: 'dec',
    datatype: 'double',
    unit: 'deg',
    ucd: 'pos.eq.dec;meta.main',
    verbosity: 1,
    description: 'declination, ICRS',
  },
  {
    ...plain,
    name: 'redshift',
    key: 'redshift',
    datatype: 'double',
    ucd: 'src.redshift',
    verbosity: 2,
    description: 'barycentric redshift, from wavelengths in vacuum',
  },
  {
    ...plain,
    name: 'redshift_error',
    key: 'redshiftError',
    datatype: 'double',
    ucd: 'stat.error;src.redshift',
    verbosity: 2,
    description: 'standard error of the redshift; empty where it was set by hand without a fit',
  },
  {
    ...plain,
    name: 'probability',
    key: 'probability',
    datatype: 'double',
    ucd: 'stat.probability;src.redshift',
    verbosity: 2,
    description:
      "the engine's calibrated probability that this redshift is right within 1,000 km/s; empty where it was set by hand and no candidate agrees",
  },
  {
    ...plain,
    name: 'confidence',
    key: 'confidence',
    datatype: 'char',
    ucd: 'meta.code.qual;src.redshift',
    verbosity: 2,
    description: 'secure, probable or ambiguous: the word of the people who decided, else of the engine',
  },
  {
    ...plain,
    name: 'object_class',
    key: 'objectClass',
    datatype: 'char',
    ucd: 'src.class',
    verbosity: 2,
    description: 'class of the candidate whose redshift this is',
  },
  {
    ...plain,
    name: 'decided_by',
    key: 'decidedBy',
    datatype: 'char',
    ucd: 'meta.code',
    verbosity: 2,
    description: 'people, or engine where nobody has looked at the spectrum',
  },
  ...lineFlux('flux_h_alpha_6565', 'hAlphaFlux', 'hAlphaFluxError', 'em.line.Halpha', 'H-alpha 6565'),
  ...lineFlux('flux_h_beta_4863', 'hBetaFlux', 'hBetaFluxError', 'em.line.Hbeta', 'H-beta 4863'),
  ...lineFlux('flux_o_iii_5008', 'o3Flux', 'o3FluxError', 'em.line.OIII', '[O III] 5008'),
  ...lineFlux(
    'flux_o_ii_3728',
    'o2Flux',
    'o2FluxError',
    'em.line',
    '[O II] 3727 and 3730 together',
    '; the two in quadrature, which overstates it where the doublet is not resolved',
  ),
  {
    ...plain,
    name: 'spectrum',
    key: 'spectrum',
    datatype: 'char',
    ucd: 'meta.id',
    verbosity: 3,
    description: 'identifier of the spectrum that was measured',
  },
];

/** The values of a row in the order of the columns. */
export function cellsOf(row: ReleaseRow, columns: readonly ReleaseColumn[]): (string | number | null)[] {
  return columns.map(({ key }) => row[key]);
}

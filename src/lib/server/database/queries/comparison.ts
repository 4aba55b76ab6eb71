import { QueryTypes, type Transaction } from 'sequelize';
import {
  CHANGES,
  type Change,
  type ComparedSpectrum,
  type ComparisonCount,
  type ComparisonFilter,
} from '$lib/domain/comparison';
import { CONFIDENCE_WORDS, type Confidence } from '$lib/domain/confidence';
import { database } from '../connection';

const select = { type: QueryTypes.SELECT } as const;

/** CODATA value of the speed of light, km/s, exact. */
const LIGHT = 299_792.458;
const MEAN = '(1 + 0.5 * (b.redshift + a.redshift))';
/** As `velocityBetweenKms` and `verdictsAgree` of science/review have them; a test compares the two. */
const VELOCITY = `(${LIGHT} * ABS(a.redshift - b.redshift) / ${MEAN})`;
const TOLERANCE = `GREATEST(300, 3 * ${LIGHT} * SQRT(POW(COALESCE(a.redshift_error, 0), 2)
  + POW(COALESCE(b.redshift_error, 0), 2)) / ${MEAN})`;
const CHANGE = `CASE WHEN a.redshift IS NULL AND b.redshift IS NOT NULL THEN 'lost'
  WHEN a.redshift IS NOT NULL AND b.redshift IS NULL THEN 'found' WHEN ${VELOCITY} > ${TOLERANCE} THEN 'moved'
  WHEN a.confidence <> b.confidence THEN 'confidence' ELSE 'alike' END`;
const WORDS = CONFIDENCE_WORDS.map((word) => `'${word}'`).join(', ');
const STEPS = `ABS(CAST(FIELD(a.confidence, ${WORDS}) AS SIGNED) - CAST(FIELD(b.confidence, ${WORDS}) AS SIGNED))`;

/** A re-measure as someone may see it: spectra whose engine's answer is hidden from them are left out. */
export interface ComparisonOf {
  remeasureId: string;
  hidden: string[];
}

const FROM = `remeasured_spectra r JOIN spectra s ON s.id = r.spectrum_id JOIN files f ON f.id = s.file_id
  JOIN measurements b ON b.id = r.before_id JOIN measurements a ON a.id = r.after_id
  WHERE r.remeasure_id = :remeasureId AND r.state = 'measured'`;

function where({ remeasureId, hidden }: ComparisonOf, filter: ComparisonFilter = {}) {
  const parts = ['1 = 1'];
  if (hidden.length) parts.push('s.id NOT IN (:hidden)');
  if (filter.change) parts.push(`${CHANGE} = :change`);
  if (filter.from) parts.push('b.confidence = :from');
  if (filter.to) parts.push('a.confidence = :to');
  if (filter.leastKms !== undefined) parts.push(`${VELOCITY} >= :leastKms`);
  if (filter.mostKms !== undefined) parts.push(`${VELOCITY} <= :mostKms`);
  if (filter.accepted === 'accepted') parts.push('s.current_measurement_id <=> a.id');
  if (filter.accepted === 'open') parts.push('NOT (s.current_measurement_id <=> a.id)');
  return { sql: parts.join(' AND '), replacements: { remeasureId, hidden, ...filter } };
}

/** Ids of all spectra of a re-measure that have a before and an after. */
export async function comparedIds(remeasureId: string): Promise<string[]> {
  const rows = await database().query<{ id: string }>(`SELECT s.id FROM ${FROM}`, {
    replacements: { remeasureId },
    ...select,
  });
  return rows.map(({ id }) => id);
}

/** How many went from which word to which. */
export async function countChanges(of: ComparisonOf, filter: ComparisonFilter = {}): Promise<ComparisonCount[]> {
  const { sql, replacements } = where(of, filter);
  type Row = { from: Confidence; to: Confidence; change: Change; accepted: number | null; n: number | string };
  const rows = await database().query<Row>(
    `SELECT b.confidence AS \`from\`, a.confidence AS \`to\`, ${CHANGE} AS \`change\`, s.current_measurement_id <=> a.id AS accepted,
        COUNT(*) AS n FROM ${FROM} AND ${sql} GROUP BY 1, 2, 3, 4`,
    { replacements, ...select },
  );
  return rows.map(({ n, accepted, ...row }) => ({ ...row, accepted: !!accepted, count: Number(n) }));
}

type Sides = Record<`${'before' | 'after'}${'Id' | 'Engine' | 'Class'}`, string> &
  Record<`${'before' | 'after'}${'Redshift' | 'Error' | 'Instrument'}`, number | null> &
  Record<`${'before' | 'after'}Probability`, number> &
  Record<`${'before' | 'after'}Confidence`, Confidence>;

const side = (alias: string, name: string) => `${alias}.id AS ${name}Id, ${alias}.redshift AS ${name}Redshift,
  ${alias}.redshift_error AS ${name}Error, ${alias}.confidence AS ${name}Confidence,
  ${alias}.probability AS ${name}Probability, ${alias}.object_class AS ${name}Class,
  ${alias}.engine_version AS ${name}Engine, (SELECT v.version FROM instruments v WHERE v.id = ${alias}.instrument_id) AS ${name}Instrument`;

function answerOf(row: Sides, name: 'before' | 'after'): ComparedSpectrum['before'] {
  return {
    measurement: row[`${name}Id`],
    redshift: row[`${name}Redshift`],
    redshiftError: row[`${name}Error`],
    confidence: row[`${name}Confidence`],
    probability: row[`${name}Probability`],
    objectClass: row[`${name}Class`],
    engineVersion: row[`${name}Engine`],
    instrumentVersion: row[`${name}Instrument`],
  };
}

/** Spectra before and after, what changed most first: by kind of change, then velocity, then steps of confidence. */
export async function comparedRows(
  of: ComparisonOf,
  filter: ComparisonFilter,
  page: { limit: number; offset: number },
): Promise<ComparedSpectrum[]> {
  const { sql, replacements } = where(of, filter);
  const order = CHANGES.map((change) => `'${change}'`).join(', ');
  type Row = Sides &
    Pick<ComparedSpectrum, 'spectrum' | 'name' | 'change' | 'velocityKms'> & { accepted: number | null };
  const rows = await database().query<Row>(
    `SELECT s.id AS spectrum, COALESCE(s.name, f.original_name) AS name, ${CHANGE} AS \`change\`, ${VELOCITY} AS velocityKms,
        s.current_measurement_id <=> a.id AS accepted, ${side('b', 'before')}, ${side('a', 'after')}
      FROM ${FROM} AND ${sql}
      ORDER BY FIELD(${CHANGE}, ${order}), IF(${CHANGE} = 'moved', ${VELOCITY}, ${STEPS}) DESC, ${VELOCITY} DESC, s.id
      LIMIT :limit OFFSET :offset`,
    { replacements: { ...replacements, ...page }, ...select },
  );
  return rows.map((row) => ({
    spectrum: row.spectrum,
    name: row.name,
    change: row.change,
    velocityKms: row.velocityKms,
    before: answerOf(row, 'before'),
    after: answerOf(row, 'after'),
    accepted: !!row.accepted,
  }));
}

/** What accepting needs of a spectrum. */
export interface AcceptableRow {
  spectrumId: string;
  fileId: string;
  currentId: string | null;
  afterId: string;
  redshift: number | null;
  redshiftError: number | null;
}

/** The spectra of a filter with their new measurements, held until the transaction ends, if one is given. */
export async function acceptableRows(
  of: ComparisonOf,
  filter: ComparisonFilter,
  transaction?: Transaction,
): Promise<AcceptableRow[]> {
  const { sql, replacements } = where(of, filter);
  return database().query<AcceptableRow>(
    `SELECT s.id AS spectrumId, s.file_id AS fileId, s.current_measurement_id AS currentId, a.id AS afterId, a.redshift,
        a.redshift_error AS redshiftError FROM ${FROM} AND ${sql} ORDER BY s.id ${transaction ? 'FOR UPDATE' : ''}`,
    { replacements, ...select, transaction },
  );
}

import { z } from 'zod';
import { decodeCursor } from '$lib/api/cursor';
import { parse } from '$lib/api/parse';
import { CONFIDENCE_WORDS } from '$lib/domain/confidence';
import { Refusal } from '$lib/domain/refusal';
import type { RowFilter } from '../database/queries/release-rows-read';

const NUMBER = /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i;

/** A decimal number as a query string or a form brings it; a true minus is read as one. What is empty is not there. */
export function readNumber(text: string): number {
  const plain = text.trim().replaceAll('\u2212', '-');
  return NUMBER.test(plain) ? Number(plain) : NaN;
}

const number = (low: number, high: number, what: string) =>
  z
    .string()
    .transform(readNumber)
    .refine((value) => value >= low && value <= high, `give ${what}`)
    .optional();

const whole = (low: number, high: number) =>
  number(low, high, `a whole number from ${low} to ${high.toLocaleString('en-US')}`).refine(
    (value) => value === undefined || Number.isInteger(value),
    'give a whole number',
  );

export const ROW_FORMATS = ['json', 'csv', 'votable'] as const;
export type RowFormat = (typeof ROW_FORMATS)[number];

/** Rows of one JSON page where the query names no limit, and the most it may name. */
export const DEFAULT_LIMIT = 1_000;
const MOST_ROWS_A_PAGE = 10_000;

const PARAMETERS = 'ra, dec, radius, redshift_min, redshift_max, confidence, limit, cursor, format';

function unknownParameter(issue: z.core.$ZodRawIssue): string | undefined {
  if (issue.code !== 'unrecognized_keys') return undefined;
  return `there is no parameter ${issue.keys.join(', ')}; those there are: ${PARAMETERS}`;
}

const rowQuerySchema = z
  .strictObject(
    {
      ra: number(0, 360, 'the right ascension in ICRS degrees, 0 to 360'),
      dec: number(-90, 90, 'the declination in ICRS degrees, -90 to 90'),
      radius: number(0, 180, 'the radius of the cone in degrees, 0 to 180'),
      redshift_min: number(-1, 1000, 'a redshift, such as 0.25'),
      redshift_max: number(-1, 1000, 'a redshift, such as 0.4'),
      confidence: z
        .string()
        .transform((text) => text.split(',').map((word) => word.trim()))
        .refine(
          (words) => words.every((word) => (CONFIDENCE_WORDS as readonly string[]).includes(word)),
          `take from ${CONFIDENCE_WORDS.join(', ')}, with commas between`,
        )
        .optional(),
      limit: whole(1, MOST_ROWS_A_PAGE),
      cursor: z.string().max(500).optional(),
      format: z.enum(ROW_FORMATS, `give ${ROW_FORMATS.join(', ')}`).optional(),
    },
    { error: unknownParameter },
  )
  .superRefine(({ ra, dec, radius, redshift_min: low, redshift_max: high }, context) => {
    const cone = { ra, dec, radius };
    const missing = Object.entries(cone).filter(([, value]) => value === undefined);
    if (missing.length === 1 || missing.length === 2) {
      const message = `a cone needs ra, dec and radius together, and ${missing.map(([name]) => name).join(' and ')} ${missing.length === 1 ? 'is' : 'are'} missing`;
      context.addIssue({ code: 'custom', path: [missing[0][0]], message });
    }
    if (low !== undefined && high !== undefined && low > high) {
      context.addIssue({ code: 'custom', path: ['redshift_min'], message: 'lies above redshift_max' });
    }
  });

export interface RowQuery {
  filter: RowFilter;
  limit?: number;
  /** Number of the row that the cursor stands behind; 0 without one. */
  after: number;
  format?: RowFormat;
  /** The same query always has the same text; part of its ETag. */
  text: string;
}

function placeOf(cursor: string | undefined): number {
  if (!cursor) return 0;
  const [place] = decodeCursor(cursor, 1);
  if (typeof place === 'number' && Number.isSafeInteger(place) && place >= 0) return place;
  throw new Refusal('invalid', 'The cursor is not one that this list gave.', 'Start without a cursor.', 'cursor');
}

/**
 * The parameters of a query for rows. Empty ones count as left out, as a form without script sends them; `confidence`
 * may be repeated; an unknown one is refused, since a filter misspelt would give too many rows in silence.
 */
export function parseRowQuery(params: URLSearchParams): RowQuery {
  const given: Record<string, string> = {};
  for (const name of new Set(params.keys())) {
    const values = params.getAll(name).filter((value) => value.trim() !== '');
    if (values.length > 1 && name !== 'confidence') {
      throw new Refusal('invalid', `${name} is given ${values.length} times.`, 'Give it once.', name);
    }
    if (values.length) given[name] = values.join(',');
  }
  const parsed = parse(rowQuerySchema, given, 'The query');
  const { ra, dec, radius, redshift_min, redshift_max, confidence, limit, format } = parsed;
  const filter: RowFilter = {
    ...(ra !== undefined && dec !== undefined && radius !== undefined && { cone: { ra: ra % 360, dec, radius } }),
    ...(redshift_min !== undefined && { redshiftMin: redshift_min }),
    ...(redshift_max !== undefined && { redshiftMax: redshift_max }),
    ...(confidence && { confidence: [...new Set(confidence)].sort() }),
  };
  const after = placeOf(parsed.cursor);
  return { filter, limit, after, format, text: JSON.stringify([filter, limit ?? null, after]) };
}

import { Refusal } from '$lib/domain/refusal';
import { cellsOf, RELEASE_COLUMNS, type ReleaseColumn } from '$lib/domain/release-columns';
import { votableError, votableHead, votableRow, votableTail } from '$lib/formats/tables/write-votable';
import { releaseRowBatches, type Cone } from '../database/queries/release-rows-read';
import { describeRelease, findRelease, type FoundRelease } from './find-release';
import { readNumber } from './parse-row-query';
import { textStream } from './text-stream';

/** Simple Cone Search 1.03 (section 2.2): these three columns carry words of the first UCD list, and no other does. */
const FIRST_LIST: Partial<Record<string, string>> = {
  'meta.id;meta.main': 'ID_MAIN',
  'pos.eq.ra;meta.main': 'POS_EQ_RA_MAIN',
  'pos.eq.dec;meta.main': 'POS_EQ_DEC_MAIN',
};

/** What to answer; the protocol wants its errors as tables, with the status of an answer. */
export interface ConeAnswer {
  status: number;
  body: string | ReadableStream<Uint8Array>;
}

/** Numbers of a cone search by parameter, in the words of its errors. */
const RANGES = {
  RA: { low: 0, high: 360, what: 'right ascension in ICRS decimal degrees, 0 to 360' },
  DEC: { low: -90, high: 90, what: 'declination in ICRS decimal degrees, -90 to 90' },
  SR: { low: 0, high: 180, what: 'radius in decimal degrees, 0 to 180' },
} as const;

function readParameters(params: URLSearchParams): { cone: Cone; verbosity: number } {
  const given = new Map<string, string>();
  for (const [name, value] of params) if (!given.has(name.toUpperCase())) given.set(name.toUpperCase(), value);
  const read = (name: keyof typeof RANGES): number => {
    const { low, high, what } = RANGES[name];
    const text = given.get(name)?.trim();
    if (!text) throw new Refusal('invalid', `The parameter ${name} is missing: ${what}.`);
    const value = readNumber(text);
    if (Number.isNaN(value)) throw new Refusal('invalid', `${name}=${text} is not a number: ${what}.`);
    if (value < low || value > high) throw new Refusal('invalid', `${name}=${text} is out of range: ${what}.`);
    return value;
  };
  const cone = { ra: read('RA') % 360, dec: read('DEC'), radius: read('SR') };
  const verb = given.get('VERB')?.trim() || '2';
  if (!/^[123]$/.test(verb)) throw new Refusal('invalid', `VERB=${verb} is not 1, 2 or 3.`);
  return { cone, verbosity: Number(verb) };
}

/**
 * Public use-case: Simple Cone Search 1.03 on the latest release of a catalogue. SR=0 asks for the columns alone; names
 * of parameters may be in any case, and unknown ones are ignored, as the standard says.
 */
export async function coneSearch(slug: string, params: URLSearchParams): Promise<ConeAnswer> {
  try {
    const found = await findRelease(slug, 'latest');
    const { cone, verbosity } = readParameters(params);
    const columns = RELEASE_COLUMNS.filter((column) => column.verbosity <= verbosity).map((column) => ({
      ...column,
      ucd: FIRST_LIST[column.ucd] ?? column.ucd,
    }));
    return { status: 200, body: textStream(pieces(found, cone, columns)) };
  } catch (error) {
    if (!(error instanceof Refusal)) throw error;
    return { status: error.code === 'not-found' ? 404 : 200, body: votableError(error.message) };
  }
}

async function* pieces(found: FoundRelease, cone: Cone, columns: ReleaseColumn[]): AsyncGenerator<string> {
  const { release } = found;
  yield votableHead({
    tableName: 'rows',
    description: describeRelease(found),
    columns,
    infos: [
      ['SERVICE_PROTOCOL', 'Simple Cone Search 1.03'],
      ['release', String(release.number)],
    ],
  });
  if (cone.radius > 0) {
    for await (const batch of releaseRowBatches(release.id, { cone })) {
      yield batch.map((row) => votableRow(cellsOf(row, columns))).join('');
    }
  }
  yield votableTail;
}

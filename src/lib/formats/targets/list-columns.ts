import { problemAt } from '../place';
import type { ListColumn, ListTable } from './list-table';

/** Which column of a target list is what, by its place in the row. */
export interface ListColumns {
  name: number | null;
  ra: number | null;
  dec: number | null;
  priority: number | null;
  magnitudes: { at: number; band: string }[];
  /** Columns of dates, which must say their zone. */
  dates: number[];
  /** Names of columns that are not kept. */
  ignored: string[];
}

const plain = (name: string) => name.toLowerCase().replace(/[\s_.-]+/g, '');
const NAMES =
  /^(name|object|objectname|target|targetname|targetid|source|sourcename|sourceid|designation|id|identifier)$/;
const RA = /^(ra|raj2000|raicrs|alpha|rightascension|raobj|ratarg)(deg(rees)?|h(ours?)?|hr|rad)?$/;
const DEC = /^(de|dec|dej2000|decj2000|deicrs|decicrs|delta|declination|decobj|dectarg)(deg(rees)?|rad)?$/;
const PRIORITY = /^(priority|prio|urgency)$/;
const MAGNITUDE = /^(mag(nitude)?|[a-z0-9]{1,6}mag|mag[a-z0-9]{1,6}|[ugrizyjhk]|[ubvri])$/;
const DATE = /^(date(obs)?|time|epoch|observed(at|on)?|notbefore|notafter|start(time)?|end(time)?|utc?)$/;

const byUcd = (ucd: string | null, start: string) => ucd?.toLowerCase().split(';')[0].startsWith(start) ?? false;

function find(columns: ListColumn[], matches: (column: ListColumn) => boolean): number | null {
  const at = columns.findIndex(matches);
  return at < 0 ? null : at;
}

/** A magnitude's band from its heading: `r` of `mag_r`, `rmag` and `r`; the unit or UCD where the heading has none. */
function bandOf({ name, ucd }: ListColumn): string {
  const bare = name.trim().replace(/^mag(nitude)?[\s_.-]*|[\s_.-]*mag(nitude)?$/gi, '');
  return bare || ucd?.split('em.').at(1)?.split('.').at(-1)?.split(';')[0] || 'unnamed';
}

/**
 * Finds the columns of a target list by UCD first, then by name.
 *
 * @throws InputProblem where there is neither a name nor a position.
 */
export function findListColumns({ columns }: ListTable, file: string): ListColumns {
  const named = (pattern: RegExp) => find(columns, ({ name }) => pattern.test(plain(name)));
  const name = find(columns, ({ ucd }) => ucd?.toLowerCase() === 'meta.id;meta.main') ?? named(NAMES);
  const ra = find(columns, ({ ucd }) => byUcd(ucd, 'pos.eq.ra')) ?? named(RA);
  const dec = find(columns, ({ ucd }) => byUcd(ucd, 'pos.eq.dec')) ?? named(DEC);
  if (name === null && (ra === null || dec === null)) {
    throw problemAt(
      { file },
      'columns-unknown',
      `The list has neither a column of names nor one each for right ascension and declination, but ${columns.map((c) => `"${c.name}"`).join(', ')}.`.slice(
        0,
        400,
      ),
      'Name them name, ra (deg) or ra (h), and dec (deg).',
    );
  }
  if ((ra === null) !== (dec === null)) {
    const missing = ra === null ? 'right ascension' : 'declination';
    throw problemAt({ file }, 'position-half', `The list has no column for ${missing}.`, 'Give both or neither.');
  }
  const priority = named(PRIORITY);
  const taken = new Set([name, ra, dec, priority]);
  const magnitudes: { at: number; band: string }[] = [];
  const dates: number[] = [];
  const ignored: string[] = [];
  columns.forEach((column, at) => {
    if (taken.has(at)) return;
    if (byUcd(column.ucd, 'phot.mag') || MAGNITUDE.test(plain(column.name)))
      magnitudes.push({ at, band: bandOf(column) });
    else if (byUcd(column.ucd, 'time') || DATE.test(plain(column.name))) dates.push(at);
    else ignored.push(column.name);
  });
  return { name, ra, dec, priority, magnitudes, dates, ignored };
}

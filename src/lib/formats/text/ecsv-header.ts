import type { CardValue } from '../cards';
import { problemAt, type Place } from '../place';
import type { TextColumnWords } from './text-column';
import { parseYamlSubset, type Yaml } from './yaml-subset';

/** What an ECSV header says. */
export interface EcsvHeader {
  delimiter: string;
  columns: TextColumnWords[];
  cards: [string, CardValue][];
}

function isMap(value: Yaml | undefined): value is { [key: string]: Yaml } {
  return typeof value === 'object' && value !== null && !Array.isArray(value);
}

function text(value: Yaml | undefined): string | null {
  return typeof value === 'string' || typeof value === 'number' ? String(value) : null;
}

/** Cards of the `meta` map (also where it is written as a list of one-key maps, for order). */
function metaCards(meta: Yaml | undefined): [string, CardValue][] {
  const maps = Array.isArray(meta) ? meta.filter(isMap) : isMap(meta) ? [meta] : [];
  return maps.flatMap((map) =>
    Object.entries(map).filter((entry): entry is [string, CardValue] =>
      ['string', 'number', 'boolean'].includes(typeof entry[1]),
    ),
  );
}

/**
 * Reads the header of an ECSV 1.0 table from its comment lines (open format, doi:10.5281/zenodo.4792325).
 *
 * @returns null where the comments are not those of ECSV.
 * @throws InputProblem where the header's YAML cannot be read.
 */
export function readEcsvHeader(comments: string[], place: Place): EcsvHeader | null {
  if (!/^\s*%ECSV\b/.test(comments[0] ?? '')) return null;
  let root: Yaml;
  try {
    const marker = comments.findIndex((line) => line.trim() === '---');
    root = parseYamlSubset(comments.slice(marker + 1));
  } catch (error) {
    throw problemAt(
      { ...place, detail: 'ECSV header' },
      'ecsv-header',
      `The header cannot be read (${(error as Error).message}).`,
      'Write the table again with a program that follows ECSV 1.0.',
    );
  }
  if (!isMap(root)) return { delimiter: ' ', columns: [], cards: [] };
  const columns = (Array.isArray(root.datatype) ? root.datatype : []).filter(isMap).map((column) => ({
    name: text(column.name) ?? '',
    unit: text(column.unit),
    description: text(column.description),
    ucd: isMap(column.meta) ? text(column.meta.ucd) : text(column.ucd),
  }));
  return { delimiter: text(root.delimiter) ?? ' ', columns, cards: metaCards(root.meta) };
}

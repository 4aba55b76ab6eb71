import { XMLParser } from 'fast-xml-parser';
import { problemAt } from '../place';
import { MAX_HEADING_CHARACTERS, type ListTable } from './list-table';

type Element = Record<string, unknown>;
const LISTS = new Set(['RESOURCE', 'TABLE', 'FIELD', 'TR', 'TD', 'COOSYS']);

const attribute = (element: Element | undefined, name: string) => {
  const value = element?.[`@${name}`];
  return value === undefined ? null : String(value);
};

function firstTable(element: Element): Element | null {
  const [table] = (element.TABLE as Element[] | undefined) ?? [];
  if (table) return table;
  for (const inner of (element.RESOURCE as Element[] | undefined) ?? []) {
    const found = firstTable(inner);
    if (found) return found;
  }
  return null;
}

function firstSystem(element: Element): string | null {
  const [system] = (element.COOSYS as Element[] | undefined) ?? [];
  if (system) return [attribute(system, 'system'), attribute(system, 'equinox')].filter(Boolean).join(' ') || null;
  for (const inner of (element.RESOURCE as Element[] | undefined) ?? []) {
    const found = firstSystem(inner);
    if (found) return found;
  }
  return null;
}

const cellText = (cell: unknown): string =>
  typeof cell === 'object' && cell !== null ? String((cell as Element)['#text'] ?? '') : String(cell ?? '');

/**
 * Reads the first table of a VOTable (IVOA recommendation 1.1 to 1.5) whose data stand as TABLEDATA.
 *
 * @throws InputProblem where the XML is broken or declares entities, or the data stand in binary.
 */
export function readVotableList(text: string, file: string): ListTable {
  const fail = (code: string, what: string, mend: string) => problemAt({ file }, code, what, mend);
  if (/<!DOCTYPE|<!ENTITY/i.test(text)) {
    throw fail('xml-doctype', 'The VOTable declares a document type.', 'Leave it out: VOTable needs none.');
  }
  let document: Element;
  try {
    const parser = new XMLParser({
      ignoreAttributes: false,
      attributeNamePrefix: '@',
      removeNSPrefix: true,
      parseTagValue: false,
      parseAttributeValue: false,
      isArray: (name) => LISTS.has(name),
    });
    document = parser.parse(text, true) as Element;
  } catch (error) {
    const reason = (error as Error).message.slice(0, 120);
    throw fail('xml-broken', `The XML is broken: ${reason}.`, 'Write the list again, or as CSV.');
  }
  const root = document.VOTABLE as Element | undefined;
  const table = root && firstTable(root);
  if (!table) throw fail('table-missing', 'The VOTable holds no table.', 'Write one TABLE with FIELDs and TABLEDATA.');
  const data = (table.DATA ?? {}) as Element;
  if (!('TABLEDATA' in data) && Object.keys(data).length > 0) {
    throw fail(
      'votable-binary',
      `The data of the VOTable stand as ${Object.keys(data)[0]}.`,
      'Save it with the TABLEDATA serialisation.',
    );
  }
  const fields = (table.FIELD as Element[] | undefined) ?? [];
  const tableData = data.TABLEDATA as Element | string | undefined;
  const rows = ((typeof tableData === 'object' ? tableData.TR : undefined) as Element[] | undefined) ?? [];
  return {
    columns: fields.map((field) => ({
      name: (attribute(field, 'name') ?? '').slice(0, MAX_HEADING_CHARACTERS),
      unit: attribute(field, 'unit'),
      ucd: attribute(field, 'ucd'),
    })),
    rows: rows.map((row) => ((row.TD as unknown[] | undefined) ?? []).map((cell) => cellText(cell).trim())),
    places: rows.map((_, i) => `row ${i + 1}`),
    system: firstSystem(root),
  };
}

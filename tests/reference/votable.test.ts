// Outside sources: VOTable 1.4 (IVOA 2019) by data/ivoa/tiny.vot, which STILTS votlint accepts; the UCD1+ controlled vocabulary as
// shipped with astropy 5.2.1 (data/ivoa/ucd1p-words.txt); XML 1.0 (W3C, fifth edition) section 2.2 for characters.
import { readFileSync } from 'node:fs';
import { XMLParser, XMLValidator } from 'fast-xml-parser';
import { describe, expect, it } from 'vitest';
import { RELEASE_COLUMNS } from '$lib/domain/release-columns';
import { votableError, votableHead, votableRow, votableTail } from '$lib/formats/tables/write-votable';

const data = (name: string) => readFileSync(new URL(`./data/ivoa/${name}`, import.meta.url), 'utf8');
const parser = new XMLParser({
  ignoreAttributes: false,
  attributeNamePrefix: '@',
  isArray: (name) => name === 'FIELD',
});
type Element = Record<string, string>;
interface Votable {
  '@version': string;
  '@xmlns': string;
  RESOURCE: {
    '@type': string;
    INFO: Element | Element[];
    COOSYS: Element;
    TABLE: { FIELD: Element[]; DATA: { TABLEDATA: { TR: { TD: unknown[] } } } };
  };
  INFO?: Element;
}
const votable = (text: string) => (parser.parse(text) as { VOTABLE: Votable }).VOTABLE;

const head = votableHead({ tableName: 'rows', description: 'a < b & "c"', columns: RELEASE_COLUMNS });
const cells = RELEASE_COLUMNS.map(({ datatype }, i) => (datatype === 'char' ? `<T> & "${i}"\u0001` : i / 3));
const document = `${head}${votableRow(cells)}${votableTail}`;

describe('a VOTable of ours', () => {
  it('is well-formed, whatever the cells hold', () => {
    expect(XMLValidator.validate(document)).toBe(true);

    expect(document).not.toMatch(/[\u0000-\u0008\u000b\u000c\u000e-\u001f]/);
    expect(document).toContain('&lt;T&gt; &amp; &quot;1&quot;\ufffd');
  });

  it('has the namespace, version and elements of the document that the validator accepts', () => {
    const [ours, theirs] = [votable(document), votable(data('tiny.vot'))];
    expect([ours['@version'], ours['@xmlns'], ours.RESOURCE['@type']]).toEqual([
      theirs['@version'],
      theirs['@xmlns'],
      theirs.RESOURCE['@type'],
    ]);
    const elements = (text: string) => [...new Set([...text.matchAll(/<([A-Z]+)[ >]/g)].map(([, name]) => name))];
    expect(elements(document).filter((name) => name !== 'DESCRIPTION')).toEqual(elements(data('tiny.vot')));
    expect(ours.RESOURCE.COOSYS['@system']).toBe('ICRS');
  });

  it('names only datatypes of the standard, and an array size for text', () => {
    for (const field of votable(document).RESOURCE.TABLE.FIELD) {
      expect(['char', 'int', 'double']).toContain(field['@datatype']);
      expect(field['@arraysize']).toBe(field['@datatype'] === 'char' ? '*' : undefined);
      // ID is an XML name, and letters, digits and underscores need no quotes in ADQL.
      expect(field['@ID']).toMatch(/^[a-z][a-z0-9_]*$/);
    }
  });

  it('writes as many cells as there are fields, what is not known as an empty one', () => {
    expect(votable(document).RESOURCE.TABLE.DATA.TABLEDATA.TR.TD).toHaveLength(RELEASE_COLUMNS.length);
    expect(votableRow([null, NaN, Infinity, 0.1, 'x'])).toBe(
      '<TR><TD></TD><TD></TD><TD></TD><TD>0.1</TD><TD>x</TD></TR>\n',
    );
  });

  it('says what is wrong in an INFO named Error under VOTABLE', () => {
    const text = votableError('DEC=91 is "out of range" & more');
    expect(XMLValidator.validate(text)).toBe(true);
    const parsed = votable(text);
    expect(parsed.INFO?.['@name']).toBe('Error');
    expect(text).toContain('value="DEC=91 is &quot;out of range&quot; &amp; more"');
    expect(parsed.RESOURCE.INFO).toMatchObject({ '@name': 'QUERY_STATUS', '@value': 'ERROR' });
  });
});

describe('the UCD of a column', () => {
  const words = new Map(
    data('ucd1p-words.txt')
      .split('\n')
      .filter((line) => /^[PSQECV]\s*\|/.test(line))
      .map((line) => line.split('|').map((part) => part.trim()))
      .map(([place, word]) => [word.toLowerCase(), place]),
  );

  it('stands on a vocabulary that was read', () => {
    expect(words.size).toBeGreaterThan(400);
    expect(words.get('src.redshift')).toBe('Q');
  });

  it.each(RELEASE_COLUMNS.map(({ name, ucd }) => [name, ucd]))('%s: %s', (_name, ucd) => {
    ucd.split(';').forEach((word, i) => {
      const place = words.get(word.toLowerCase());
      expect(place, `${word} is no word of UCD1+`).toBeDefined();
      expect(i === 0 ? 'S' : 'P', `${word} may not stand in place ${i + 1}`).not.toBe(place);
    });
  });
});

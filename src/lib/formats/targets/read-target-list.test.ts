import { describe, expect, it } from 'vitest';
import { InputProblem } from '$lib/domain/input-problem';
import { readTargetList } from './read-target-list';

const read = (text: string) => readTargetList(new TextEncoder().encode(text), 'list.csv');
function refusal(text: string) {
  try {
    read(text);
  } catch (error) {
    if (error instanceof InputProblem) return error.problem;
    throw error;
  }
  throw new Error('nothing was refused');
}

describe('readTargetList of CSV', () => {
  it('reads names, degrees, magnitudes by band and priority, and says what it does not keep', () => {
    const list = read(
      'name,RA (deg),Dec (deg),mag_r,gmag,priority,fibre\nJ0412.6−3120,63.1525,−31.341,21.3,21.9,7,12\n',
    );
    expect(list.rows).toEqual([
      {
        row: 1,
        name: 'J0412.6−3120',
        raDegrees: 63.1525,
        decDegrees: -31.341,
        priority: 7,
        magnitudes: { r: 21.3, g: 21.9 },
      },
    ]);
    expect(list.ignored).toEqual(['fibre']);
    expect(list.rightAscensionIn).toBe('degrees');
  });

  it.each([
    ['unit in brackets', 'name,ra [h],dec\nA,4.2,-31', 63],
    ['end of the heading', 'name,ra_hours,dec\nA,4.2,-31', 63],
    ['row of units', 'name,ra,dec\n,h,deg\nA,4.2,-31', 63],
    ['sexagesimal, which is hours', 'name,ra,dec\nA,04:12:00.0,-31 00 00', 63],
    ['letters', 'name;RAJ2000;DEJ2000\nA;04h12m00s;-31d00m00s', 63],
    ['a number over 24 elsewhere in the column', 'name,ra,dec\nA,4.2,-31\nB,63,-31', 4.2],
    ['radians', 'name,ra (rad),dec (rad)\nA,1,0.5', 180 / Math.PI],
  ])('tells the unit of right ascension by %s', (_, text, degrees) => {
    expect(read(text).rows[0].raDegrees).toBeCloseTo(degrees, 9);
  });

  it('refuses right ascension of which nobody can tell degrees from hours', () => {
    expect(refusal('name,ra,dec\nA,4.2,-31\nB,12,-31')).toMatchObject({
      code: 'ra-unit-unknown',
      where: 'list.csv, column ra',
      mend: 'Write the unit into the heading: "ra (deg)" or "ra (h)".',
    });
  });

  it('refuses single rows with their line, and keeps the rest', () => {
    const list = read(
      [
        'name,ra (h),dec,date,priority',
        'good,4.2,-31,2026-09-14T03:00:00Z,1',
        'zone,4.2,-31,2026-09-14T03:00:00,1',
        'hours,63,-31,,1',
        'south,4.2,-91,,1',
        'odd,four,-31,,1',
        'words,4.2,-31,,high',
        ',,,,',
        '"comma, kept",4.3,-31,,',
        'long,4.2,-31,,1,2',
      ].join('\n'),
    );
    expect(list.rows.map(({ name }) => name)).toEqual(['good', 'comma, kept']);
    expect(list.problems.map(({ code, where }) => [code, where])).toEqual([
      ['date-zone', 'list.csv, line 3'],
      ['ra-not-hours', 'list.csv, line 4'],
      ['dec-range', 'list.csv, line 5'],
      ['angle-odd', 'list.csv, line 6'],
      ['number-odd', 'list.csv, line 7'],
      ['target-nameless', 'list.csv, line 8'],
      ['row-length', 'list.csv, line 10'],
    ]);
    expect(list.problems[0].mend).toBe('Write 2026-09-14T03:00:00Z if it is UTC.');
  });

  it('looks at no more of a heading or an angle than either can have', () => {
    const list = read(`name,ra (deg),dec,fibre${'x'.repeat(5000)}\nA,63,-31,1\nB,63${' '.repeat(5000)}1,-31,1`);
    expect(list.ignored).toEqual([`fibre${'x'.repeat(195)}`]);
    expect(list.rows.map(({ name }) => name)).toEqual(['A']);
    expect(list.problems.map(({ code }) => code)).toEqual(['angle-odd']);
  });

  it('names a target without a name by its place, brought into 0 to 360 degrees', () => {
    expect(read('ra (deg),dec (deg)\n-0.5,10').rows[0]).toMatchObject({
      name: '359.50000 +10.00000',
      raDegrees: 359.5,
    });
  });

  it.each([
    ['headings-missing', '1,63,-31\n2,64,-31'],
    ['columns-unknown', 'fibre,plate\n1,2'],
    ['position-half', 'name,ra (deg)\nA,63'],
    ['list-empty', 'name,ra (deg),dec\n'],
    ['csv-quotes', 'name,ra (deg),dec\n"A,63,-31'],
  ])('refuses a list: %s', (code, text) => expect(refusal(text).code).toBe(code));

  it('refuses bytes that are no text', () => {
    expect(() => readTargetList(new Uint8Array([0xff, 0xfe, 0x41]), 'list.csv')).toThrow(/not text in UTF-8/);
  });
});

const votable = (fields: string, rows: string, head = '') =>
  `<?xml version="1.0"?><VOTABLE version="1.4" xmlns="http://www.ivoa.net/xml/VOTable/v1.3"><RESOURCE>${head}<TABLE>${fields}<DATA><TABLEDATA>${rows}</TABLEDATA></DATA></TABLE></RESOURCE></VOTABLE>`;
// UCDs of the IVOA's UCD1+ controlled vocabulary 1.5.
const FIELDS = `<FIELD name="who" datatype="char" arraysize="*" ucd="meta.id;meta.main"/>
  <FIELD name="a" datatype="double" unit="deg" ucd="pos.eq.ra;meta.main"/>
  <FIELD name="d" datatype="double" unit="deg" ucd="pos.eq.dec;meta.main"/>
  <FIELD name="m" datatype="float" unit="mag" ucd="phot.mag;em.opt.R"/>`;

describe('readTargetList of VOTable', () => {
  it('goes by UCD and unit', () => {
    const text = votable(
      FIELDS,
      '<TR><TD>A &amp; B</TD><TD>4.2</TD><TD>-31</TD><TD>21.5</TD></TR><TR><TD>C</TD><TD/><TD/><TD/></TR>',
    );
    expect(read(text).rows).toEqual([
      { row: 1, name: 'A & B', raDegrees: 4.2, decDegrees: -31, priority: null, magnitudes: { m: 21.5 } },
      { row: 2, name: 'C', raDegrees: null, decDegrees: null, priority: null, magnitudes: {} },
    ]);
  });

  it('refuses binary data, entities, an old equinox and broken XML in words', () => {
    const binary = votable(FIELDS, '').replaceAll('TABLEDATA', 'BINARY2');
    expect(refusal(binary)).toMatchObject({
      code: 'votable-binary',
      mend: 'Save it with the TABLEDATA serialisation.',
    });
    const bomb = votable(FIELDS, '').replace('?>', '?><!DOCTYPE x [<!ENTITY a "b">]>');
    expect(refusal(bomb).code).toBe('xml-doctype');
    const old = votable(
      FIELDS,
      '<TR><TD>A</TD><TD>4.2</TD><TD>1</TD><TD/></TR>',
      '<COOSYS ID="s" system="eq_FK4" equinox="B1950"/>',
    );
    expect(refusal(old)).toMatchObject({ code: 'system-old', what: 'The positions are in eq_FK4 B1950.' });
    expect(refusal('<?xml version="1.0"?><VOTABLE><RESOURCE>').code).toBe('xml-broken');
  });
});

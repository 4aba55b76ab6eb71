// Outside source: Simple Cone Search 1.03 (IVOA recommendation, 2008-02-22), as gathered in tests/reference/data/ivoa/FACTS.md; each
// title is a rule of it.
import { readFileSync } from 'node:fs';
import { XMLParser } from 'fast-xml-parser';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { separationDegrees } from '$lib/domain/sky';
import { coneSearch } from '$lib/server/query/cone-search';
import { freezeDraft } from '$lib/server/release/freeze-draft';
import { makeInstallation, type Installation } from './installation';
import { makeWorld } from './release-world';

let installation: Installation;
let slug: string;
let unreleased: string;
const places = Array.from({ length: 40 }, (_, i) => ({ name: `C-${i}`, ra: 62 + i * 0.05, dec: -32 + i * 0.03 }));

beforeAll(async () => {
  installation = await makeInstallation();
  const world = await makeWorld(installation, places);
  slug = world.slug;
  await freezeDraft(world.signer, slug, await world.draft());
  unreleased = (await makeWorld(installation, [places[0]])).slug;
});
afterAll(() => installation.destroy());

type Field = Record<string, string>;
const parser = new XMLParser({
  ignoreAttributes: false,
  attributeNamePrefix: '@',
  parseTagValue: false,
  isArray: (name) => ['FIELD', 'TR', 'RESOURCE', 'TABLE', 'TD'].includes(name),
});

function parse(text: string) {
  const { VOTABLE } = parser.parse(text);
  const tables = VOTABLE.RESOURCE[0].TABLE ?? [];
  const fields: Field[] = tables[0]?.FIELD ?? [];
  const rows: string[][] = (tables[0]?.DATA.TABLEDATA?.TR ?? []).map((row: { TD: string[] }) => row.TD);
  return { resources: VOTABLE.RESOURCE.length, tables: tables.length, fields, rows, error: VOTABLE.INFO?.['@value'] };
}
async function ask(query: string, of = slug) {
  const { status, body } = await coneSearch(of, new URLSearchParams(query));
  return { status, ...parse(await new Response(body).text()) };
}
const UCD1 = ['ID_MAIN', 'POS_EQ_RA_MAIN', 'POS_EQ_DEC_MAIN'];

describe('Simple Cone Search 1.03', () => {
  it('answers RA, DEC and SR with the rows in the cone, in one RESOURCE with one TABLE', async () => {
    const answer = await ask('RA=63&DEC=-31.4&SR=0.3');
    expect(answer).toMatchObject({ status: 200, resources: 1, tables: 1, error: undefined });
    const wanted = places.filter(({ ra, dec }) => separationDegrees(63, -31.4, ra, dec) <= 0.3).map(({ name }) => name);
    expect(wanted.length).toBeGreaterThan(3);
    expect(answer.rows.map((row) => row[0])).toEqual(wanted);
  });

  it('has one field each of ID_MAIN, POS_EQ_RA_MAIN and POS_EQ_DEC_MAIN, of the types asked for', async () => {
    const { fields } = await ask('RA=63&DEC=-31.4&SR=0.3&VERB=3');
    for (const ucd of UCD1) expect(fields.filter((field) => field['@ucd'] === ucd)).toHaveLength(1);
    const type = (ucd: string) => fields.find((field) => field['@ucd'] === ucd)?.['@datatype'];
    expect(UCD1.map(type)).toEqual(['char', 'double', 'double']);
    expect(fields.filter((field) => /pos\.eq|meta\.main/.test(field['@ucd']))).toEqual([]);
  });

  it('uses for those fields what a client finds positions by in the reference document', async () => {
    const reference = parse(
      readFileSync(new URL('../reference/data/ivoa/tiny-conesearch.vot', import.meta.url), 'utf8'),
    );
    const { fields } = await ask('RA=63&DEC=-31.4&SR=0.3');
    const found = (list: Field[]) =>
      UCD1.map((ucd) => list.find((field) => field['@ucd'] === ucd)).map((field) => [
        field?.['@datatype'],
        field?.['@arraysize'],
        field?.['@unit'],
        field?.['@ref'],
      ]);
    expect(found(fields)).toEqual(found(reference.fields));
  });

  it('takes names of parameters in any case and order, and ignores unknown ones', async () => {
    const { rows } = await ask('sr=0.3&Dec=-31.4&colour=red&ra=63');
    expect(rows).toEqual((await ask('RA=63&DEC=-31.4&SR=0.3')).rows);
  });

  it('gives columns and no rows for SR=0 and for an empty cone, without an error', async () => {
    for (const query of ['RA=62&DEC=-32&SR=0', 'RA=200&DEC=60&SR=1']) {
      const { status, fields, rows, error } = await ask(query);
      expect([status, rows, error]).toEqual([200, [], undefined]);
      expect(fields.length).toBeGreaterThan(5);
    }
  });

  it('gives few, the usual and all columns for VERB 1, 2 and 3; 2 where it is missing', async () => {
    const columns = async (verb: string) =>
      (await ask(`RA=62&DEC=-32&SR=0${verb}`)).fields.map((field) => field['@name']);
    expect(await columns('&VERB=1')).toEqual(['target', 'ra', 'dec']);
    expect((await columns('&VERB=3')).length).toBeGreaterThan((await columns('&VERB=2')).length);
    expect(await columns('')).toEqual(await columns('&VERB=2'));
  });

  it.each([
    ['DEC=-31&SR=1', /RA is missing/],
    ['RA=63&DEC=-31', /SR is missing/],
    ['RA=&DEC=-31&SR=1', /RA is missing/],
    ['RA=abc&DEC=-31&SR=1', /RA=abc is not a number/],
    ['RA=63&DEC=91&SR=1', /DEC=91 is out of range/],
    ['RA=-1&DEC=-31&SR=1', /RA=-1 is out of range/],
    ['RA=63&DEC=-31&SR=181', /SR=181 is out of range/],
    ['RA=63&DEC=-31&SR=-1', /SR=-1 is out of range/],
    ['RA=63&DEC=-31&SR=1&VERB=4', /VERB=4/],
    ['RA=1e999&DEC=-31&SR=1', /out of range/],
  ])('answers %s with a table that holds nothing but the error', async (query, message) => {
    const answer = await ask(query);
    expect(answer).toMatchObject({ status: 200, tables: 0 });
    expect(answer.error).toMatch(message);
  });

  it('says in the same form that there is no such catalogue, or none released', async () => {
    for (const name of ['nothing', unreleased]) {
      const answer = await ask('RA=63&DEC=-31&SR=1', name);
      expect(answer.status).toBe(404);
      expect(answer.error).toMatch(/no released catalogue/);
    }
  });
});

import { describe, expect, it } from 'vitest';
import { curlSnippet, pythonSnippet } from './code-snippets';
import { addressWith, queryIn } from './query-address';
import { faultsByField } from './query-faults';

describe('queryIn', () => {
  it('keeps the query, reads a true minus, and leaves out what is empty or of the page alone', () => {
    const params = new URLSearchParams('dec=\u22121.5&ra=10&radius=&before=100&confidence=secure&confidence=probable');
    expect(queryIn(params)).toEqual([
      ['ra', '10'],
      ['dec', '-1.5'],
      ['confidence', 'secure,probable'],
    ]);
    expect(addressWith('/rows', queryIn(params), { format: 'csv' })).toBe(
      '/rows?ra=10&dec=-1.5&confidence=secure,probable&format=csv',
    );
    expect(addressWith('/rows', [])).toBe('/rows');
  });
});

describe('code snippets', () => {
  it('quote what a visitor typed, so that a pasted command holds nothing but the query', () => {
    expect(curlSnippet('http://x/rows', [['ra', "1'; rm -rf ~; '"]])).toContain(`-d 'ra=1'\\''; rm -rf ~; '\\'''`);
    expect(pythonSnippet('http://x/rows', [['ra', '1", "x": "']])).toContain('"ra": "1\\", \\"x\\": \\"",');
  });

  it('write numbers as numbers in Python', () => {
    expect(pythonSnippet('http://x/rows', [['dec', '-31.34']])).toContain('    "dec": -31.34,');
  });
});

describe('faultsByField', () => {
  it('puts each fault beside its own field', () => {
    const what = 'The query is not valid: ra: give the right ascension; dec: a cone needs all, and dec is missing.';
    expect([...faultsByField(what)]).toEqual([
      ['ra', 'Give the right ascension.'],
      ['dec', 'A cone needs all, and dec is missing.'],
    ]);
    expect(faultsByField('The query is not valid: value: there is no parameter zmin.').size).toBe(0);
  });
});

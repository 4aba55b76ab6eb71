import { parse } from 'csv-parse/sync';
import { describe, expect, it } from 'vitest';
import { csvRecord } from './write-csv';

describe('csvRecord', () => {
  it('quotes what RFC 4180 quotes, and an RFC 4180 reader gives it back', () => {
    const cells = ['plain', 'a,b', 'say "so"', 'two\r\nlines', '', 'Cené'];
    const record = csvRecord(cells);
    expect(record).toBe('plain,"a,b","say ""so""","two\r\nlines",,Cené\r\n');
    expect(parse(record)).toEqual([cells]);
  });

  it('writes numbers that read back as the same double', () => {
    const values = [0.1 + 0.2, -1 / 3, 5e-324, 1.7976931348623157e308, 1e21, -0.00002, 123456789012345680];
    expect(csvRecord(values).trim().split(',').map(Number)).toEqual(values);
  });

  it('leaves empty what is not known', () => {
    expect(csvRecord([null, NaN, Infinity, 0])).toBe(',,,0\r\n');
  });

  it('keeps text from becoming a formula, and numbers as they are', () => {
    expect(csvRecord(['=1+1', '+1', '-1', '@x', '\tx', -1])).toBe("'=1+1,'+1,'-1,'@x,'\tx,-1\r\n");
    expect(csvRecord(['=HYPERLINK("x")'])).toBe('"\'=HYPERLINK(""x"")"\r\n');
  });
});

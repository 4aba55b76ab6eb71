import { describe, expect, it } from 'vitest';
import { COLUMNS, columnsOf, columnsText, FIRST_COLUMNS, HEADS } from './columns';

describe('columnsOf', () => {
  it('gives the first choice where nothing is kept, or nothing that is known', () => {
    expect(columnsOf(null)).toEqual(FIRST_COLUMNS);
    expect(columnsOf('colour')).toEqual(FIRST_COLUMNS);
    expect(FIRST_COLUMNS).toContain('verdict');
    expect(FIRST_COLUMNS).not.toContain('noise');
  });

  it('keeps the order of the page, and the name always', () => {
    expect(columnsOf('noise,redshift,unknown')).toEqual(['name', 'redshift', 'noise']);
    expect(columnsOf(columnsText(['name', 'exposure', 'file']))).toEqual(['name', 'exposure', 'file']);
  });

  it('has a head for every column', () => {
    expect(Object.keys(HEADS).sort()).toEqual([...COLUMNS].sort());
  });
});

import { describe, expect, it } from 'vitest';
import { blindLooks, type LookGiven } from './blind-looks';

const row = (id: string, userId: string, redshift: number | null, withdrawn = false): LookGiven => ({
  id,
  spectrumId: 's',
  userId,
  redshift,
  redshiftError: 1e-5,
  withdrawn,
  word: withdrawn ? null : 0,
  seconds: null,
});
const said = (rows: LookGiven[], ruled?: Set<string>) => blindLooks(rows, ruled).map(({ id }) => id);

describe('blindLooks', () => {
  it("counts a correction made before anyone else's verdict, not one made after seeing it", () => {
    expect(said([row('1', 'a', 0.3), row('2', 'a', 0.4), row('3', 'b', 0.7), row('4', 'a', 0.7)])).toEqual(['2', '3']);
    expect(said([row('1', 'a', 0.3), row('2', 'b', 0.7), row('3', 'b', 0.3)])).toEqual(['1', '2']);
  });

  it('takes the next verdict where the first was taken back before the other came', () => {
    const rows = [row('1', 'a', 0.3), row('2', 'a', null, true), row('3', 'b', 0.7), row('4', 'a', 0.5)];
    expect(said(rows)).toEqual(['3', '4']);
  });

  it('leaves out who took their only verdict back, and whoever ruled', () => {
    expect(said([row('1', 'a', 0.3), row('2', 'a', null, true)])).toEqual([]);
    expect(said([row('1', 'a', 0.3), row('2', 'b', 0.7), row('3', 'c', 0.3)], new Set(['s c']))).toEqual(['1', '2']);
  });
});

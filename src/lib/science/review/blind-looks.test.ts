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
  seenOthers: null,
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

  it('goes by what was seen where that was kept, whatever came first', () => {
    const seen = (one: LookGiven, seenOthers: boolean) => ({ ...one, seenOthers });
    // a corrected theirs after b's came, without having seen it; then again, having seen it
    const rows = [
      seen(row('1', 'a', 0.3), false),
      seen(row('2', 'b', 0.7), false),
      seen(row('3', 'a', 0.4), false),
      seen(row('4', 'a', 0.7), true),
    ];
    expect(said(rows)).toEqual(['2', '3']);
    // a third person who saw the question before giving a look of their own gave no blind one
    expect(said([...rows, seen(row('5', 'c', 0.7), true)])).toEqual(['2', '3']);
    // taken back unseen, and given anew after seeing
    expect(said([rows[0], rows[1], seen(row('3', 'a', null, true), false), rows[3]])).toEqual(['2']);
  });
});

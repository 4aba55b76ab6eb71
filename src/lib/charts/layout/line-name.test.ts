import { describe, expect, it } from 'vitest';
import { lineLabel, lineLabelsIn } from './line-name';

describe('lineLabel', () => {
  it('writes hydrogen in Greek and keeps the name in one piece', () => {
    expect(['H-alpha 6565', 'Lyman-beta', '[O III] 5008', 'H-11 3772'].map(lineLabel)).toEqual([
      'Hα\u00a06565',
      'Lyβ',
      '[O\u00a0III]\u00a05008',
      'H11\u00a03772',
    ]);
  });
  it('finds names in a sentence', () => {
    expect(lineLabelsIn('H-beta and [O III] 5008 stand in one column, S/N 7.5')).toBe(
      'Hβ and [O\u00a0III]\u00a05008 stand in one column, S/N 7.5',
    );
  });
});

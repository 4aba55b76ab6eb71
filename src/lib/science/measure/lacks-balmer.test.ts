import { describe, expect, it } from 'vitest';
import { lacksBalmer } from './lacks-balmer';

const lines = (signals: Record<string, number>) =>
  Object.entries(signals).map(([line, signalToNoise]) => ({ line, signalToNoise }));

describe('lacksBalmer', () => {
  it('doubts a bright [O III] without H-beta, and [S II] without H-alpha', () => {
    expect(lacksBalmer(lines({ '[O III] 5008': 27, 'H-beta 4863': 0.4 }))).toBe(true);
    expect(lacksBalmer(lines({ '[S II] 6718': 13, 'H-alpha 6565': 1.2 }))).toBe(true);
  });

  it('does not doubt a Balmer line that is faint or out of range', () => {
    expect(lacksBalmer(lines({ '[O III] 5008': 27, 'H-beta 4863': 2.6 }))).toBe(false);
    expect(lacksBalmer(lines({ '[O III] 5008': 27 }))).toBe(false);
    expect(lacksBalmer(lines({ '[O III] 5008': 12, 'H-beta 4863': 0.4 }))).toBe(false);
  });
});

import { describe, expect, it } from 'vitest';
import { newerReductions, stacksAndParts, type Exposure } from './exposure';

const START = Date.parse('2026-09-15T00:24:10Z');

function exposure(id: string, startMinutes: number, minutes: number, more: Partial<Exposure> = {}): Exposure {
  const startMs = START + startMinutes * 60_000;
  return {
    id,
    fileId: `file ${id}`,
    key: `HFS ${startMs} ${minutes}`,
    instrument: 'HFS',
    startMs,
    endMs: startMs + minutes * 60_000,
    exposureSeconds: minutes * 60,
    wavelengthMin: 3700,
    wavelengthMax: 9800,
    ...more,
  };
}

describe('newerReductions', () => {
  it('replaces every older file of one exposure by the newest', () => {
    const found = newerReductions([exposure('c', 0, 15), exposure('a', 0, 15), exposure('b', 0, 15)]);
    expect([...found].sort()).toEqual([
      ['a', 'c'],
      ['b', 'c'],
    ]);
  });

  it('leaves other exposures, the other arm and other fibres of the file alone', () => {
    const first = exposure('a', 0, 15);
    expect(newerReductions([first, exposure('b', 16, 15)]).size).toBe(0);
    expect(
      newerReductions([{ ...first, wavelengthMax: 5800 }, exposure('b', 0, 15, { wavelengthMin: 5500 })]).size,
    ).toBe(0);
    expect(newerReductions([first, { ...exposure('b', 0, 15), fileId: first.fileId }]).size).toBe(0);
    expect(newerReductions([{ ...first, key: null }, exposure('b', 0, 15, { key: null })]).size).toBe(0);
  });
});

describe('stacksAndParts', () => {
  const singles = [exposure('a', 0, 15), exposure('b', 16, 15), exposure('c', 32, 15)];
  const stack = exposure('s', 0, 47, { exposureSeconds: 2700 });

  it('links a stack to the exposures within its time', () => {
    const later = exposure('d', 60, 15);
    expect(stacksAndParts([...singles, stack, later]).sort((x, y) => (x.part < y.part ? -1 : 1))).toEqual([
      { whole: 's', part: 'a' },
      { whole: 's', part: 'b' },
      { whole: 's', part: 'c' },
    ]);
  });

  it('links nothing of another instrument or arm, nor exposures of one length', () => {
    expect(stacksAndParts([stack, { ...singles[0], instrument: 'other' }])).toEqual([]);
    expect(
      stacksAndParts([
        { ...stack, wavelengthMin: 6000 },
        { ...singles[0], wavelengthMax: 6100 },
      ]),
    ).toEqual([]);
    expect(stacksAndParts([singles[0], { ...singles[0], id: 'again' }])).toEqual([]);
  });

  it('allows for clocks cut to seconds and a readout at the end', () => {
    const early = exposure('e', -0.5, 15);
    expect(stacksAndParts([stack, early])).toEqual([{ whole: 's', part: 'e' }]);
  });
});

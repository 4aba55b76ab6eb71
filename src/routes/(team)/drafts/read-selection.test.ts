import { describe, expect, it } from 'vitest';
import { readSelection } from './read-selection';

function form(entries: [string, string][]): FormData {
  const data = new FormData();
  for (const [name, value] of entries) data.append(name, value);
  return data;
}

describe('readSelection', () => {
  it('reads boxes, names one a line, and pairs with a bar, whatever line ends the browser sends', () => {
    const data = form([
      ['confidence', 'secure'],
      ['confidence', 'probable'],
      ['engineAlone', 'on'],
      ['leaveOut', ' T-1 \r\n\r\nT 2\r\n'],
      ['truePairs', 'A|B\r\n C c | D '],
    ]);
    expect(readSelection(data)).toEqual({
      confidence: ['secure', 'probable'],
      engineAlone: true,
      leaveOut: ['T-1', 'T 2'],
      truePairs: [
        ['A', 'B'],
        ['C c', 'D'],
      ],
    });
  });

  it('leaves out what is empty, and takes people alone where the box is not ticked', () => {
    expect(readSelection(form([['confidence', 'secure']]))).toEqual({ confidence: ['secure'], engineAlone: false });
  });

  it.each([
    [[] as [string, string][], 'confidence', /No confidence word/],
    [[['confidence', 'none']] as [string, string][], 'confidence', /No confidence word/],
    [
      [
        ['confidence', 'secure'],
        ['truePairs', 'A'],
      ] as [string, string][],
      'truePairs',
      /"A" is no pair/,
    ],
  ])('refuses %j', (entries, where, what) => {
    expect(() => readSelection(form(entries))).toThrow(what);
    expect(() => readSelection(form(entries))).toThrow(expect.objectContaining({ where }));
  });
});

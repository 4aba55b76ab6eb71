import { describe, expect, it } from 'vitest';
import { matchAnswer } from './match-answer';

describe('matchAnswer', () => {
  const answer = {
    files: [
      { name: 'a.fits', already: false },
      { name: 'b.fits', already: true },
    ],
    archives: [{ name: 'night.zip' }],
    refused: [{ name: 'c.fits', what: 'c.fits is empty.', mend: 'Check that it was written whole.' }],
  };
  it('gives each file its own fate in the order sent', () => {
    expect(matchAnswer(['c.fits', 'a.fits', 'b.fits'], answer)).toEqual([
      { state: 'refused', what: 'c.fits is empty.', mend: 'Check that it was written whole.' },
      { state: 'taken' },
      { state: 'already' },
    ]);
  });
  it('tells an archive, whose members are still to be taken, from a file', () => {
    expect(matchAnswer(['night.zip'], answer)).toEqual([{ state: 'archive' }]);
  });
  it('never calls a file taken that the answer does not name', () => {
    expect(matchAnswer(['d.fits'], answer)).toEqual([{ state: 'unknown' }]);
  });
  it('knows a name again that the server has cleaned', () => {
    const long = `${'x'.repeat(300)}.fits`;
    const names = ['tab\t.fits', long];
    const files = [
      { name: 'tab.fits', already: false },
      { name: long.slice(-255), already: false },
    ];
    expect(matchAnswer(names, { files, refused: [], archives: [] })).toEqual([{ state: 'taken' }, { state: 'taken' }]);
  });
});

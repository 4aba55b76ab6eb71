import { describe, expect, it } from 'vitest';
import { completionsOf, mentionAt, mentionedIn } from './mention';

const people = [
  { id: '1', name: 'Ines Prado' },
  { id: '2', name: 'Ines Prado Vale' },
  { id: '3', name: 'Koji Abé' },
  { id: '4', name: 'Koji Abé' },
  { id: '5', name: 'Ann' },
];

describe('mentionedIn', () => {
  it('finds names after an @, the longest that fits, in capitals or not', () => {
    expect(mentionedIn('@Ines Prado Vale, is this sky? @ines prado: look', people)).toEqual(['2', '1']);
    expect(mentionedIn('see (@Ann)', people)).toEqual(['5']);
  });

  it('means both of two with one name, however the accent is written', () => {
    expect(mentionedIn('@Koji Abe\u0301', people)).toEqual(['3', '4']);
  });

  it('takes no address, no longer word and no stranger for a mention', () => {
    expect(mentionedIn('mail ann@Ann.example, @Anna, @Nobody, @', people)).toEqual([]);
  });
});

describe('mentionAt', () => {
  it('is what stands between the @ and the caret', () => {
    expect(mentionAt('so @In', 6)).toEqual({ from: 3, query: 'In' });
    expect(mentionAt('@Ines Pr and', 8)).toEqual({ from: 0, query: 'Ines Pr' });
    expect(mentionAt('@', 1)).toEqual({ from: 0, query: '' });
  });

  it('is none in an address, on another line, or before any @', () => {
    expect([mentionAt('a@b', 3), mentionAt('@a\nb', 4), mentionAt('no', 2), mentionAt('@ x', 3)]).toEqual([
      null,
      null,
      null,
      null,
    ]);
  });
});

describe('completionsOf', () => {
  it('names those a word of whose name begins so, and nobody once a name is whole', () => {
    expect(completionsOf('pr', people).map(({ id }) => id)).toEqual(['1', '2']);
    expect(completionsOf('', people)).toHaveLength(5);
    expect(completionsOf('ann', people)).toEqual([]);
  });
});

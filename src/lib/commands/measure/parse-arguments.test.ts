import { expect, it } from 'vitest';
import { parseArguments } from './parse-arguments';

it('takes options anywhere and everything after -- for a file', () => {
  expect(
    parseArguments(['a.fits', '--explain', 'b.fits', '--instrument', 'i.json', '--threads', '3', '--', '--odd']),
  ).toEqual({
    files: ['a.fits', 'b.fits', '--odd'],
    instrumentFile: 'i.json',
    explain: true,
    threads: 3,
  });
});

it.each([[['--bogus', 'a']], [[]], [['a', '--instrument']], [['a', '--threads', '0']], [['a', '--threads', 'two']]])(
  'refuses %j with a sentence',
  (argv) => {
    expect(() => parseArguments(argv)).toThrow(/\.$/);
  },
);

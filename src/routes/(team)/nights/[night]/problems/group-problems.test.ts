import { describe, expect, it } from 'vitest';
import { groupProblems, placeInFile } from './group-problems';

const problem = (file: string, code: string, where = file) => ({
  file,
  fileId: file,
  code,
  what: `${code} in ${file}.`,
  where,
  mend: 'Send it again.',
});

describe('groupProblems', () => {
  it('tells few problems one by one, in the order they came', () => {
    const problems = [problem('a', 'truncated'), problem('b', 'no-flux'), problem('c', 'truncated')];
    expect(groupProblems(problems).map(({ first }) => first.file)).toEqual(['a', 'b', 'c']);
  });
  it('tells many of one kind once, at the place of the first', () => {
    const problems = ['a', 'b', 'c', 'd', 'e'].map((file) => problem(file, file === 'b' ? 'no-flux' : 'truncated'));
    const groups = groupProblems(problems);
    expect(groups.map(({ code, problems }) => [code, problems.length])).toEqual([
      ['truncated', 4],
      ['no-flux', 1],
    ]);
  });
  it('gives nothing for no problems', () => {
    expect(groupProblems([])).toEqual([]);
  });
});

describe('placeInFile', () => {
  it('says only what the place adds to the file', () => {
    expect(placeInFile(problem('a.fits', 'x', 'a.fits, HDU 1, row 3'))).toBe('HDU 1, row 3');
    expect(placeInFile(problem('a.fits', 'x', 'a.fits'))).toBe('');
    expect(placeInFile(problem('a.fits', 'x', 'column FLUX'))).toBe('column FLUX');
  });
});

import { describe, expect, it } from 'vitest';
import { collectChosen, collectDropped } from './collect-dropped';

const file = (fullPath: string) => ({
  isFile: true,
  name: fullPath.split('/').pop(),
  fullPath,
  file: (done: (file: File) => void) => done(new File(['x'], fullPath.split('/').pop()!)),
});
const broken = (fullPath: string) => ({
  ...file(fullPath),
  file: (_done: unknown, fail: (reason: Error) => void) => fail(new Error('gone')),
});
/** A folder whose reader hands out two entries at a time, as browsers hand out a hundred. */
const folder = (fullPath: string, children: unknown[]) => ({
  isFile: false,
  name: fullPath.split('/').pop(),
  fullPath,
  createReader: () => {
    const rest = [...children];
    return { readEntries: (done: (some: unknown[]) => void) => done(rest.splice(0, 2)) };
  },
});
const drop = (...entries: unknown[]) =>
  ({ items: entries.map((entry) => ({ webkitGetAsEntry: () => entry })), files: [] }) as unknown as DataTransfer;

describe('collectDropped', () => {
  it('walks folders to their ends, in the order of the paths', async () => {
    const deep = folder('/night/blue', [file('/night/blue/10.fits'), file('/night/blue/9.fits')]);
    const { found } = await collectDropped(drop(folder('/night', [file('/night/c'), deep, file('/night/a')])));
    expect(found.map(({ path }) => path)).toEqual(['night/a', 'night/blue/9.fits', 'night/blue/10.fits', 'night/c']);
  });
  it('counts the hidden files it leaves out', async () => {
    const { found, hidden } = await collectDropped(drop(file('/.index'), folder('/.cache', [file('/.cache/x')])));
    expect([found.length, hidden]).toEqual([0, 2]);
  });
  it('names what the browser could not read and goes on', async () => {
    const { found, unreadable } = await collectDropped(drop(broken('/a.fits'), file('/b.fits')));
    expect([found.map(({ path }) => path), unreadable]).toEqual([['b.fits'], ['a.fits']]);
  });
});

describe('collectChosen', () => {
  it('keeps the folder of files that a folder chooser brings', () => {
    const chosen = Object.defineProperty(new File(['x'], 'a.fits'), 'webkitRelativePath', { value: 'night/a.fits' });
    expect(collectChosen([new File(['x'], 'z.fits'), chosen]).found.map(({ path }) => path)).toEqual([
      'night/a.fits',
      'z.fits',
    ]);
  });
});

import { describe, expect, it } from 'vitest';
import type { Announced } from '$lib/domain/upload';
import { Checker, type Announce } from './checker';
import { UploadEntry } from './upload-entry.svelte';

const entries = (count: number) =>
  Array.from({ length: count }, (_, i) => {
    const entry = new UploadEntry(new File([String(i)], `${i}.fits`), `night/${i}.fits`);
    entry.state = 'checking';
    return entry;
  });
/** A server that has the digests given. */
const server = (here: string[], told: Parameters<Announce>[1][] = []): Announce => {
  return async (_, files) => {
    told.push(files);
    return files.map(({ path, sha256 }): Announced['files'][number] =>
      path.endsWith('/3.fits')
        ? { path, state: 'refused', what: 'It is empty.', mend: 'Write it again.' }
        : { path, state: sha256 && here.includes(sha256) ? 'here' : 'expected' },
    );
  };
};
const hash = async (file: File) => (file.name === '2.fits' ? null : `digest of ${file.name}`);
async function check(checker: Checker, files: UploadEntry[]) {
  const verdicts = new Map<string, string>();
  await checker.check(files, (entry, { state }) => verdicts.set(entry.name, state));
  return verdicts;
}

describe('Checker', () => {
  it('gives every file one verdict: send, there already, refused unsent, or no longer readable', async () => {
    const checker = new Checker('night', hash, server(['digest of 1.fits']));
    expect([...(await check(checker, entries(5)))].sort()).toEqual([
      ['0.fits', 'send'],
      ['1.fits', 'already'],
      ['2.fits', 'refused'],
      ['3.fits', 'refused'],
      ['4.fits', 'send'],
    ]);
  });

  it('tells all files by name before the first digest, so that the night knows what is to come', async () => {
    const told: Parameters<Announce>[1][] = [];
    await check(new Checker('night', hash, server([], told)), entries(2_500));
    expect(told.slice(0, 3).map(({ length }) => length)).toEqual([1000, 1000, 500]);
    expect(
      told
        .slice(0, 3)
        .flat()
        .every(({ sha256 }) => sha256 === undefined),
    ).toBe(true);
    expect(
      told
        .slice(3)
        .flat()
        .every(({ sha256 }) => sha256 !== undefined),
    ).toBe(true);
    // The one it can't read and the one refused by name are not asked for again.
    expect(told.slice(3).flat()).toHaveLength(2_498);
  });

  it('has all sent where the server can’t be asked', async () => {
    const verdicts = await check(new Checker('night', hash, async () => null), entries(2));
    expect([...verdicts.values()]).toEqual(['send', 'send']);
  });

  it('asks nothing more of files that were cancelled meanwhile', async () => {
    const files = entries(4);
    const told: Parameters<Announce>[1][] = [];
    const cancelling = async (file: File) => {
      files[0].state = 'cancelled';
      return hash(file);
    };
    const verdicts = await check(new Checker('night', cancelling, server([], told)), files);
    expect(verdicts.has('0.fits')).toBe(false);
    expect(told[1].map(({ path }) => path)).toEqual(['night/1.fits']);
  });
});

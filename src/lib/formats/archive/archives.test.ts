import { readFileSync } from 'node:fs';
import { gunzipSync, inflateRawSync } from 'node:zlib';
import { describe, expect, it } from 'vitest';
import { InputProblem } from '$lib/domain/input-problem';
import { crc32 } from '../crc32';
import { archiveKind } from './archive-kind';
import { Expansion } from './expansion';
import type { ArchiveMember } from './member';
import { readTar } from './read-tar';
import { readZip } from './read-zip';

// Made by make-archives.py beside them: by Python's zipfile and tarfile, the system's zip (Info-ZIP) and tar (GNU).
const read = (name: string) => new Uint8Array(readFileSync(`tests/fixtures/archives/${name}`));
const text = (name: string) => `wavelength,flux\n${name}\n`.repeat(20);

async function* pieces(bytes: Uint8Array, size = 700): AsyncGenerator<Uint8Array> {
  for (let at = 0; at < bytes.length; at += size) yield bytes.subarray(at, at + size);
}
async function whole(source: AsyncIterable<Uint8Array>): Promise<Buffer> {
  const parts: Uint8Array[] = [];
  for await (const part of source) parts.push(part);
  return Buffer.concat(parts);
}
async function* inflate(packed: AsyncIterable<Uint8Array>): AsyncGenerator<Uint8Array> {
  yield* pieces(inflateRawSync(await whole(packed)), 65_536);
}
function membersOf(name: string): AsyncGenerator<ArchiveMember> {
  const bytes = read(name);
  if (/\.tar(\.gz)?$/.test(name)) return readTar(pieces(name.endsWith('gz') ? gunzipSync(bytes) : bytes), name);
  const access = {
    sizeBytes: bytes.length,
    read: async (start: number, length: number) => bytes.subarray(start, start + length),
  };
  return readZip(access, name, inflate);
}
/** A header block of a tar and the padded bytes behind it: POSIX.1-2017, pax, ustar Header Block. */
function tarEntry(type: string, body: string): [Buffer, Buffer] {
  const header = Buffer.alloc(512);
  header.write('short');
  header.write(body.length.toString(8).padStart(11, '0'), 124);
  header.write(`        ${type}`, 148);
  const sum = header.reduce((total, byte) => total + byte, 0);
  header.write(`${sum.toString(8).padStart(6, '0')}\0`, 148);
  return [header, Buffer.alloc(Math.ceil(body.length / 512) * 512).fill(body, 0, body.length)];
}
/** Text of each member by path, or the code of why there is none; `''` stands for the archive's own fault. */
async function unpack(name: string): Promise<Record<string, string>> {
  const found: Record<string, string> = {};
  try {
    for await (const member of membersOf(name)) {
      if ('refused' in member) found[member.path] = member.refused.code;
      else {
        try {
          found[member.path] = (await whole(member.body)).toString();
        } catch (error) {
          if (!(error instanceof InputProblem)) throw error;
          found[member.path] = error.problem.code;
          if (!/zip$/.test(name)) throw error;
        }
      }
    }
  } catch (error) {
    if (!(error instanceof InputProblem)) throw error;
    found[''] = error.problem.code;
  }
  return found;
}

const PLAIN = { 'night/a.csv': text('a'), 'night/b.csv': text('b'), 'night/deep/c.csv': text('c') };
const A = { 'night/a.csv': text('a') };

describe('readZip and readTar', () => {
  it.each([
    ...['plain.zip', 'stored.zip', 'by-zip.zip', 'streamed.zip'],
    ...['plain.tar', 'by-tar.tar.gz', 'by-tar-pax.tar', 'by-tar-v7.tar'],
  ])('give every member of %s', async (name) => {
    expect(await unpack(name)).toEqual(PLAIN);
  });

  it('give long and foreign names whole', async () => {
    const long = `night/${'long-'.repeat(30)}name.csv`;
    expect(await unpack('long-gnu.tar')).toEqual({ [long]: text('l'), ...A });
    expect(await unpack('long-pax.tar.gz')).toEqual({ [long]: text('l'), 'night/étoile.csv': text('e') });
  });

  it.each([
    ['climbs.zip', { '../../out.csv': 'archive-climbs', 'night/..\\up.csv': 'archive-climbs', ...A }],
    ['absolute.zip', { '/etc/out.csv': 'archive-absolute', 'C:\\out.csv': 'archive-absolute', ...A }],
    ['link.zip', { 'night/link.csv': 'archive-link', ...A }],
    ['device.zip', { 'night/pipe.csv': 'archive-device', ...A }],
    ['lzma.zip', { 'night/a.csv': 'archive-method' }],
    ['bomb.zip', { 'night/zeros.fits': 'archive-bomb', ...A }],
    ['damaged.zip', { ...PLAIN, 'night/a.csv': 'archive-damaged' }],
    ['hidden.zip', A],
    ['empty.zip', {}],
    [
      'bad.tar.gz',
      {
        '../out.csv': 'archive-climbs',
        '/etc/out.csv': 'archive-absolute',
        'night/link.csv': 'archive-link',
        'night/hard.csv': 'archive-link',
        'night/device.csv': 'archive-device',
        'night/pipe.csv': 'archive-device',
        ...PLAIN,
      },
    ],
  ])('refuse what is wrong in %s, member by member, and go on', async (name, expected) => {
    expect(await unpack(name)).toEqual(expected);
  });

  it.each([
    [1024, 'taken'],
    [1025, 'archive-name'],
  ])('hold a member whose name has %i characters to be %s', async (length, expected) => {
    const name = 'n'.repeat(length);
    const tar = Buffer.concat([...tarEntry('L', `${name}\0`), ...tarEntry('0', 'bytes'), Buffer.alloc(1024)]);
    const found: string[] = [];
    for await (const member of readTar(pieces(tar), 'long.tar')) {
      expect(member.path).toBe(name);
      found.push('refused' in member ? member.refused.code : 'taken');
    }
    expect(found).toEqual([expected]);
  });

  it('refuse encrypted members of a zip', async () => {
    const codes = Object.values(await unpack('encrypted.zip'));
    expect(codes.length).toBe(3);
    expect(new Set(codes)).toEqual(new Set(['archive-encrypted']));
  });

  it('take one member of those that share their bytes, and refuse the others', async () => {
    expect(Object.values(await unpack('overlapping.zip'))).toEqual([text('a'), 'archive-overlap', 'archive-overlap']);
  });

  it.each([
    ['cut.zip', { '': 'archive-cut' }],
    ['cut.tar', { ...A, 'night/b.csv': 'archive-cut', '': 'archive-cut' }],
    ['damaged.tar', { ...A, '': 'archive-damaged' }],
  ])('say of %s that it is cut or damaged, after the members before the fault', async (name, expected) => {
    const found = await unpack(name);
    for (const [path, value] of Object.entries(expected)) expect(found[path], path).toBe(value);
  });

  it('go on behind a member of a tar that was not read', async () => {
    const paths: string[] = [];
    for await (const { path } of membersOf('plain.tar')) paths.push(path);
    expect(paths).toEqual(Object.keys(PLAIN));
  });

  it.each(['plain.zip', 'plain.tar'])('survive %s with any one byte changed', async (name) => {
    const bytes = read(name);
    const step = Math.max(1, Math.floor(bytes.length / 300));
    for (let at = 0; at < bytes.length; at += step) {
      const changed = bytes.slice();
      changed[at] ^= 0x55;
      const access = { sizeBytes: changed.length, read: async (s: number, n: number) => changed.subarray(s, s + n) };
      const members = name.endsWith('zip') ? readZip(access, name, inflate) : readTar(pieces(changed), name);
      try {
        for await (const member of members) if ('body' in member) await whole(member.body);
      } catch (error) {
        expect(error, `byte ${at}`).toBeInstanceOf(InputProblem);
      }
    }
  });
});

describe('archiveKind', () => {
  it.each([
    ['plain.zip', 'zip'],
    ['empty.zip', 'zip'],
    ['plain.tar', 'tar'],
    ['by-tar-v7.tar', 'tar'],
    ['by-tar.tar.gz', 'tar.gz'],
  ])('tells %s by its bytes', (name, kind) => {
    expect(archiveKind(read(name).subarray(0, 4096))).toBe(kind);
  });
  it.each(['hz_0001.fits', 'hz_0004.fits.gz', 'hz_0015.csv', 'hz_0005.dat'])(
    'takes no spectrum for one: %s',
    (name) => {
      const bytes = new Uint8Array(readFileSync(`tests/fixtures/sample-night/${name}`));
      expect(archiveKind(bytes.subarray(0, 4096))).toBeNull();
    },
  );
  it('knows other archives for what they are', () => {
    expect(archiveKind(Uint8Array.of(0x37, 0x7a, 0xbc, 0xaf, 0x27, 0x1c, 0, 4))).toBe('foreign');
    expect(archiveKind(new TextEncoder().encode('BZh91AY&SY'))).toBe('foreign');
  });
});

describe('Expansion', () => {
  it('lets a small file of blanks pass and stops a large one', () => {
    expect(() => new Expansion(1_000, 'a.zip').count(10 * 1024 * 1024)).not.toThrow();
    expect(() => new Expansion(1_000, 'a.zip').count(17 * 1024 * 1024)).toThrow(/200 times/);
  });
  it('stops at a total, whatever went in', () => {
    const expansion = new Expansion(1024 ** 3, 'a.zip');
    expansion.count(16 * 1024 ** 3);
    expect(() => expansion.count(1)).toThrow(/16 GiB/);
  });
});

describe('crc32', () => {
  // The check value of CRC-32/ISO-HDLC over "123456789" (common practice; from memory).
  it('is that of gzip and zip, in pieces too', () => {
    const bytes = new TextEncoder().encode('123456789');
    expect(crc32(bytes)).toBe(0xcbf43926);
    expect(crc32(bytes.subarray(4), crc32(bytes.subarray(0, 4)))).toBe(0xcbf43926);
  });
});

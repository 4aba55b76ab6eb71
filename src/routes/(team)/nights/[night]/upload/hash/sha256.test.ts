import { createHash } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { digestFile } from './digest-file';
import { Sha256 } from './sha256';

const ascii = (text: string) => new TextEncoder().encode(text);
const reference = (bytes: Uint8Array) => createHash('sha256').update(bytes).digest('hex');
const noise = (length: number) => Uint8Array.from({ length }, (_, i) => (i * 2654435761) >>> 24);

describe('Sha256', () => {
  // NIST, "Examples with Intermediate Values", SHA-256: one block and two blocks; FIPS 180-2, appendix B.3: a million a.
  it.each([
    ['abc', 'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad'],
    [
      'abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq',
      '248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1',
    ],
    ['a'.repeat(1_000_000), 'cdc76e5c9914fb9281a1c7e284d73e67f1809a48a497200e046d39ccc7112cd0'],
  ])('gives the published digests', (text, digest) => {
    expect(new Sha256().update(ascii(text)).hex()).toBe(digest);
  });

  it('agrees with another library at every length around its blocks, in pieces of any size', () => {
    for (let length = 0; length < 200; length++) {
      const bytes = noise(length);
      for (const piece of [1, 7, 63, 64, 65, 200]) {
        const hash = new Sha256();
        for (let at = 0; at < length; at += piece) hash.update(bytes.subarray(at, at + piece));
        expect(hash.hex(), `${length} by ${piece}`).toBe(reference(bytes));
      }
    }
  });
});

describe('digestFile', () => {
  it.each([0, 1000, 9 * 1024 * 1024])('digests a file of %i bytes, in one go or in pieces', async (length) => {
    const bytes = noise(length);
    const told: number[] = [];
    const digest = await digestFile(new Blob([bytes]), (read) => told.push(read));
    expect(digest).toBe(reference(bytes));
    if (length > 8 * 1024 * 1024) expect(told.at(-1)).toBe(length);
  });
  it('does without the browser’s own function, which pages that came by http lack', async () => {
    expect(await digestFile(new Blob(['abc']), () => {}, undefined)).toBe(reference(ascii('abc')));
  });
});

import { createHash } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { parseAppending, parseOpening } from './upload-headers';

const opening = (more: Record<string, string> = {}) =>
  parseOpening(new Headers({ 'Upload-Length': '12', 'Content-Disposition': 'attachment; filename="a.fits"', ...more }));
const refusal = (call: () => unknown) => {
  try {
    call();
  } catch (error) {
    return (error as { where: string }).where;
  }
  return 'none';
};

describe('parseOpening', () => {
  it('reads name, length and digest', () => {
    // RFC 9530, section 2: a digest is a byte sequence in base64 between colons.
    const digest = createHash('sha256').update('abc');
    const hex = digest.copy().digest('hex');
    const told = opening({ 'Repr-Digest': `sha-512=:AAAA:, sha-256=:${digest.digest('base64')}:` });
    expect(told).toEqual({ name: 'a.fits', sizeBytes: 12, sha256: hex });
  });

  it.each([
    // RFC 6266, section 5, the examples' forms.
    ['Attachment; filename=example.html', 'example.html'],
    ['INLINE; FILENAME= "an example.html"', 'an example.html'],
    [`attachment; filename="EURO rates"; filename*=utf-8''%e2%82%ac%20rates`, '€ rates'],
    ['attachment; filename="a \\"b\\".fits"', 'a "b".fits'],
  ])('reads the name of %s', (disposition, name) => {
    expect(opening({ 'Content-Disposition': disposition }).name).toBe(name);
  });

  it('takes the ordinary length where the body is the whole upload', () => {
    const headers = { 'Content-Disposition': 'attachment; filename=a', 'Content-Length': '7' };
    expect(parseOpening(new Headers({ ...headers, 'Upload-Complete': '?1' })).sizeBytes).toBe(7);
    expect(refusal(() => parseOpening(new Headers({ ...headers, 'Upload-Complete': '?0' })))).toBe('Upload-Length');
  });

  it.each([
    ['Upload-Length', '-1'],
    ['Upload-Length', '12.5'],
    ['Upload-Complete', 'yes'],
    ['Repr-Digest', 'sha-256=:short:'],
    ['Content-Disposition', "attachment; filename*=UTF-8''%ff"],
    ['Content-Disposition', 'attachment'],
  ])('refuses a %s of %s, and names it', (header, value) => {
    expect(refusal(() => opening({ [header]: value }))).toBe(header);
  });
});

describe('parseAppending', () => {
  const type = { 'Content-Type': 'application/partial-upload' };
  it('reads where the bytes begin, and whether they are the last', () => {
    expect(parseAppending(new Headers({ ...type, 'Upload-Offset': '4194304' }))).toEqual({
      offset: 4_194_304,
      isLast: false,
    });
    expect(parseAppending(new Headers({ ...type, 'Upload-Offset': '0', 'Upload-Complete': '?1' })).isLast).toBe(true);
  });
  it('refuses another type, and bytes that say no place', () => {
    expect(refusal(() => parseAppending(new Headers({ 'Upload-Offset': '0' })))).toBe('Content-Type');
    expect(refusal(() => parseAppending(new Headers(type)))).toBe('Upload-Offset');
  });
});

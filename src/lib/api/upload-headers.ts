import { z } from 'zod';
import { Refusal } from '$lib/domain/refusal';
import { sha256Schema } from '$lib/domain/upload';

/*
 * The header fields of "Resumable Uploads for HTTP" (IETF, draft-ietf-httpbis-resumable-upload), with names by
 * RFC 6266 (Content-Disposition) and digests by RFC 9530 (Repr-Digest). Values are Structured Fields (RFC 9651).
 */

const whole = z
  .string()
  .regex(/^\d{1,15}$/, 'give a whole number')
  .transform(Number);
const flag = z.enum(['?0', '?1'], 'give ?0 or ?1').transform((value) => value === '?1');

/** A header's value by its schema; undefined where the header is absent. */
function read<T extends z.ZodType>(headers: Headers, name: string, schema: T): z.output<T> | undefined {
  const value = headers.get(name)?.trim();
  if (value === undefined) return undefined;
  const result = schema.safeParse(value);
  if (result.success) return result.data;
  throw new Refusal('invalid', `The header ${name} is not valid: ${result.error.issues[0].message}.`, '', name);
}

function need<T>(value: T | undefined, name: string, mend: string): T {
  if (value === undefined) throw new Refusal('invalid', `The header ${name} is missing.`, mend, name);
  return value;
}

/** What the headers of a POST that opens an upload say. */
export function parseOpening(headers: Headers): { name: string; sizeBytes: number; sha256: string | null } {
  const complete = read(headers, 'Upload-Complete', flag);
  // A body that is the whole upload has its length in the ordinary header.
  const told = read(headers, 'Upload-Length', whole) ?? (complete ? read(headers, 'Content-Length', whole) : undefined);
  return {
    name: need(readName(headers), 'Content-Disposition', 'Send it as attachment; filename="NAME".'),
    sizeBytes: need(told, 'Upload-Length', 'Send the length of the whole file in bytes.'),
    sha256: readDigest(headers),
  };
}

/** What the headers of a PATCH that brings bytes say: where they begin, and whether they are the last. */
export function parseAppending(headers: Headers): { offset: number; isLast: boolean } {
  if (headers.get('content-type')?.split(';')[0].trim().toLowerCase() !== 'application/partial-upload') {
    const mend = 'Send the header Content-Type: application/partial-upload.';
    throw new Refusal('unsupported', 'A part of an upload has a type of its own.', mend, 'Content-Type');
  }
  const mend = 'Send the byte at which the body begins; HEAD tells where the upload stands.';
  const offset = need(read(headers, 'Upload-Offset', whole), 'Upload-Offset', mend);
  return { offset, isLast: read(headers, 'Upload-Complete', flag) ?? false };
}

/** The file name of Content-Disposition: `filename*` in UTF-8 before `filename` (RFC 6266, RFC 8187). */
function readName(headers: Headers): string | undefined {
  const value = headers.get('Content-Disposition');
  if (value === null) return undefined;
  const extended = /filename\*\s*=\s*UTF-8'[^']*'([^;\s]+)/i.exec(value);
  const quoted = /filename\s*=\s*"((?:[^"\\]|\\.)*)"/i.exec(value);
  const token = /filename\s*=\s*([^;\s"]+)/i.exec(value);
  try {
    if (extended) return decodeURIComponent(extended[1]);
  } catch {
    throw new Refusal('invalid', 'The file name is not UTF-8, percent-encoded.', '', 'Content-Disposition');
  }
  return quoted ? quoted[1].replace(/\\(.)/g, '$1') : token?.[1];
}

/** The SHA-256 of Repr-Digest, in hexadecimal; null where none is told. Digests by other functions are passed over. */
function readDigest(headers: Headers): string | null {
  const value = headers.get('Repr-Digest');
  const found = value === null ? null : /sha-256=:([A-Za-z0-9+/]{43}=):/.exec(value);
  if (value === null || (!found && !/sha-256/.test(value))) return null;
  const mend = 'Send sha-256=:BASE64: of its 32 bytes.';
  if (!found) throw new Refusal('invalid', 'The header Repr-Digest has no SHA-256 in base64.', mend, 'Repr-Digest');
  const hex = Array.from(atob(found[1]), (char) => char.charCodeAt(0).toString(16).padStart(2, '0')).join('');
  return sha256Schema.parse(hex);
}

import { createHash, randomBytes } from 'node:crypto';

/** A bearer secret with 256 bits of randomness, recognisable by its prefix in logs and scans. */
export function newSecret(prefix: 'fgt' | 'fgi'): string {
  return `${prefix}_${randomBytes(32).toString('base64url')}`;
}

/** What is stored of a secret: SHA-256 as hex. The secrets are random, so no salt or stretching is needed. */
export function hashSecret(secret: string): string {
  return createHash('sha256').update(secret).digest('hex');
}

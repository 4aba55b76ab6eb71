import { randomBytes } from 'node:crypto';

let lastMs = 0;
let counter = 0;

/**
 * A UUID version 7 (RFC 9562, section 5.7) as text: 48 bits of Unix milliseconds, then, by its section 6.2 method 1, a
 * 12-bit counter, then random bits. Keys that one process makes later sort later, within a millisecond too.
 */
export function newIdentifier(now: number = Date.now()): string {
  if (now > lastMs) {
    lastMs = now;
    // Half the counter's room is left for the rest of the millisecond.
    counter = randomBytes(2).readUInt16BE(0) & 0x7ff;
  } else if (++counter > 0xfff) {
    lastMs++;
    counter = 0;
  }
  const bytes = randomBytes(16);
  bytes.writeUIntBE(lastMs, 0, 6);
  bytes.writeUInt16BE(0x7000 | counter, 6);
  bytes[8] = (bytes[8] & 0x3f) | 0x80;
  const hex = bytes.toString('hex');
  return [hex.slice(0, 8), hex.slice(8, 12), hex.slice(12, 16), hex.slice(16, 20), hex.slice(20)].join('-');
}

/**
 * A UUID version 7 whose time lies between those of two others, so that its order tells nothing of when it was made. The
 * counter and the rest are random.
 */
export function identifierWithin(low: string, high: string): string {
  const time = (id: string) => parseInt(id.replaceAll('-', '').slice(0, 12), 16);
  const ms = time(low) + Math.floor(Math.random() * (time(high) - time(low) + 1));
  const bytes = randomBytes(16);
  bytes.writeUIntBE(ms, 0, 6);
  bytes[6] = (bytes[6] & 0x0f) | 0x70;
  bytes[8] = (bytes[8] & 0x3f) | 0x80;
  const hex = bytes.toString('hex');
  return [hex.slice(0, 8), hex.slice(8, 12), hex.slice(12, 16), hex.slice(16, 20), hex.slice(20)].join('-');
}

import { randomBytes } from 'node:crypto';

let lastMs = 0;
let counter = 0;

/** A counter as it begins a millisecond: half its room is left for the rest of it. */
const beginCounter = () => randomBytes(2).readUInt16BE(0) & 0x7ff;

/** The text of a version 7 identifier from its time, its counter and random bits. */
function spell(ms: number, count: number): string {
  const bytes = randomBytes(16);
  bytes.writeUIntBE(ms, 0, 6);
  bytes.writeUInt16BE(0x7000 | count, 6);
  bytes[8] = (bytes[8] & 0x3f) | 0x80;
  const hex = bytes.toString('hex');
  return [hex.slice(0, 8), hex.slice(8, 12), hex.slice(12, 16), hex.slice(16, 20), hex.slice(20)].join('-');
}

/**
 * A UUID version 7 (RFC 9562, section 5.7) as text: 48 bits of Unix milliseconds, then, by its section 6.2 method 1, a
 * 12-bit counter, then random bits. Keys that one process makes later sort later, within a millisecond too.
 */
export function newIdentifier(now: number = Date.now()): string {
  if (now > lastMs) {
    lastMs = now;
    counter = beginCounter();
  } else if (++counter > 0xfff) {
    lastMs++;
    counter = 0;
  }
  return spell(lastMs, counter);
}

/**
 * A UUID version 7 whose time lies between those of two others, so that its order tells nothing of when it was made. Its
 * counter is one that begins a millisecond, as most are: any other would tell that it was made so.
 */
export function identifierWithin(low: string, high: string): string {
  const time = (id: string) => parseInt(id.replaceAll('-', '').slice(0, 12), 16);
  const ms = time(low) + Math.floor(Math.random() * (time(high) - time(low) + 1));
  return spell(ms, beginCounter());
}

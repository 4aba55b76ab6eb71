/** First 32 bits of the fractional parts of the square roots of the first 8 primes (FIPS 180-4, section 5.3.3). */
const FIRST = [0x6a09e667, 0xbb67ae85, 0x3c6ef372, 0xa54ff53a, 0x510e527f, 0x9b05688c, 0x1f83d9ab, 0x5be0cd19];

/** First 32 bits of the fractional parts of the cube roots of the first 64 primes (FIPS 180-4, section 4.2.2). */
const K = Int32Array.from(firstPrimes(64), (prime) => Math.floor((Math.cbrt(prime) % 1) * 2 ** 32) | 0);

function firstPrimes(count: number): number[] {
  const primes: number[] = [];
  for (let n = 2; primes.length < count; n++) if (primes.every((prime) => n % prime !== 0)) primes.push(n);
  return primes;
}

const BLOCK = 64;

/**
 * SHA-256 of bytes that come in pieces (FIPS 180-4, section 6.2). The browser's own function wants all bytes in memory
 * at once, and is missing where the page does not come by https.
 */
export class Sha256 {
  private readonly state = Int32Array.from(FIRST);
  private readonly schedule = new Int32Array(64);
  private readonly rest = new Uint8Array(BLOCK);
  private held = 0;
  private length = 0;

  update(bytes: Uint8Array): this {
    this.length += bytes.length;
    let at = 0;
    if (this.held > 0) {
      at = Math.min(BLOCK - this.held, bytes.length);
      this.rest.set(bytes.subarray(0, at), this.held);
      this.held += at;
      if (this.held < BLOCK) return this;
      this.compress(this.rest, 0);
      this.held = 0;
    }
    for (; at + BLOCK <= bytes.length; at += BLOCK) this.compress(bytes, at);
    this.rest.set(bytes.subarray(at));
    this.held = bytes.length - at;
    return this;
  }

  /** The digest in hexadecimal; nothing may be added after it. */
  hex(): string {
    const tail = new Uint8Array(this.held < 56 ? BLOCK : 2 * BLOCK);
    tail.set(this.rest.subarray(0, this.held));
    tail[this.held] = 0x80;
    new DataView(tail.buffer).setBigUint64(tail.length - 8, BigInt(this.length) * 8n);
    for (let at = 0; at < tail.length; at += BLOCK) this.compress(tail, at);
    return Array.from(this.state, (word) => (word >>> 0).toString(16).padStart(8, '0')).join('');
  }

  private compress(bytes: Uint8Array, at: number): void {
    const { schedule: w, state } = this;
    for (let t = 0; t < 16; t++, at += 4) {
      w[t] = (bytes[at] << 24) | (bytes[at + 1] << 16) | (bytes[at + 2] << 8) | bytes[at + 3];
    }
    for (let t = 16; t < 64; t++) {
      const x = w[t - 15];
      const y = w[t - 2];
      const s0 = ((x >>> 7) | (x << 25)) ^ ((x >>> 18) | (x << 14)) ^ (x >>> 3);
      const s1 = ((y >>> 17) | (y << 15)) ^ ((y >>> 19) | (y << 13)) ^ (y >>> 10);
      w[t] = (s1 + w[t - 7] + s0 + w[t - 16]) | 0;
    }
    // Word by word: taking the array apart by its iterator costs as much as the rounds.
    let a = state[0];
    let b = state[1];
    let c = state[2];
    let d = state[3];
    let e = state[4];
    let f = state[5];
    let g = state[6];
    let h = state[7];
    for (let t = 0; t < 64; t++) {
      const s1 = ((e >>> 6) | (e << 26)) ^ ((e >>> 11) | (e << 21)) ^ ((e >>> 25) | (e << 7));
      const t1 = (h + s1 + ((e & f) ^ (~e & g)) + K[t] + w[t]) | 0;
      const s0 = ((a >>> 2) | (a << 30)) ^ ((a >>> 13) | (a << 19)) ^ ((a >>> 22) | (a << 10));
      const t2 = (s0 + ((a & b) ^ (a & c) ^ (b & c))) | 0;
      h = g;
      g = f;
      f = e;
      e = (d + t1) | 0;
      d = c;
      c = b;
      b = a;
      a = (t1 + t2) | 0;
    }
    state[0] += a;
    state[1] += b;
    state[2] += c;
    state[3] += d;
    state[4] += e;
    state[5] += f;
    state[6] += g;
    state[7] += h;
  }
}

/**
 * Seeded random numbers: xoshiro128** (Blackman & Vigna 2018, arXiv:1805.01407), its state filled by SplitMix32-style mixing with
 * the finaliser of MurmurHash3 (Appleby). The same seed gives the same numbers everywhere, so that a simulated spectrum is known by
 * its recipe and seed alone.
 */
export class Random {
  private readonly state = new Uint32Array(4);
  private spare: number | null = null;

  /** @param seed any finite number; its integer part is used modulo 2^53 */
  constructor(seed: number) {
    const whole = Math.abs(Math.trunc(seed));
    let low = whole >>> 0;
    const high = Math.floor(whole / 4294967296) >>> 0;
    for (let i = 0; i < 4; i++) {
      low = (low + 0x9e3779b9) >>> 0;
      let mixed = low ^ Math.imul(high + i, 0x85ebca6b);
      mixed = Math.imul(mixed ^ (mixed >>> 16), 0x85ebca6b);
      mixed = Math.imul(mixed ^ (mixed >>> 13), 0xc2b2ae35);
      this.state[i] = (mixed ^ (mixed >>> 16)) >>> 0;
    }
    // neighbouring seeds start alike: let the state spread first
    for (let i = 0; i < 16; i++) this.bits();
  }

  /** 32 random bits. */
  bits(): number {
    const s = this.state;
    const product = Math.imul(s[1], 5);
    const result = Math.imul((product << 7) | (product >>> 25), 9) >>> 0;
    const t = s[1] << 9;
    s[2] ^= s[0];
    s[3] ^= s[1];
    s[1] ^= s[2];
    s[0] ^= s[3];
    s[2] ^= t;
    s[3] = (s[3] << 11) | (s[3] >>> 21);
    return result;
  }

  /** Uniform in [low, high). */
  uniform(low = 0, high = 1): number {
    return low + ((high - low) * ((this.bits() >>> 5) * 67108864 + (this.bits() >>> 6))) / 9007199254740992;
  }

  /** Uniform in the logarithm between two positive numbers. */
  logUniform(low: number, high: number): number {
    return Math.exp(this.uniform(Math.log(low), Math.log(high)));
  }

  /** Normal deviate by the polar method (Marsaglia & Bray 1964). */
  normal(mean = 0, sigma = 1): number {
    if (this.spare !== null) {
      const kept = this.spare;
      this.spare = null;
      return mean + sigma * kept;
    }
    let u: number;
    let v: number;
    let s: number;
    do {
      u = 2 * this.uniform() - 1;
      v = 2 * this.uniform() - 1;
      s = u * u + v * v;
    } while (s >= 1 || s === 0);
    const factor = Math.sqrt((-2 * Math.log(s)) / s);
    this.spare = v * factor;
    return mean + sigma * u * factor;
  }

  /** Exponential deviate of the given mean. */
  exponential(mean: number): number {
    return -mean * Math.log(1 - this.uniform());
  }

  /** True with the given probability. */
  chance(probability: number): boolean {
    return this.uniform() < probability;
  }

  /** Whole number from low to high, both included. */
  integer(low: number, high: number): number {
    return low + Math.floor(this.uniform() * (high - low + 1));
  }

  /** One of the given things, all alike. */
  choice<T>(things: readonly T[]): T {
    return things[Math.floor(this.uniform() * things.length)];
  }
}

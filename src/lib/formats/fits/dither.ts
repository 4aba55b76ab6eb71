const COUNT = 10_000;

/** The 10,000 numbers in (0, 1) of the standard's own generator: x' = 16807 x mod (2^31 - 1) (FITS 4.0, appendix I). */
const SEQUENCE = (() => {
  const numbers = new Float64Array(COUNT);
  let seed = 1;
  for (let i = 0; i < COUNT; i++) {
    seed = (seed * 16807) % 2147483647;
    numbers[i] = seed / 2147483647;
  }
  return numbers;
})();

/** The dither offsets of one tile, in the order of its pixels (FITS 4.0, section 10.2 and appendix I). */
export class Dither {
  private start: number;
  private at: number;

  /** @param tile number of the tile from 0; @param seed ZDITHER0, 1 to 10,000 */
  constructor(tile: number, seed: number) {
    this.start = (tile + Math.max(1, seed) - 1) % COUNT;
    this.at = Math.floor(SEQUENCE[this.start] * 500);
  }

  next(): number {
    const value = SEQUENCE[this.at++];
    if (this.at === COUNT) {
      this.start = (this.start + 1) % COUNT;
      this.at = Math.floor(SEQUENCE[this.start] * 500);
    }
    return value;
  }
}

/**
 * Working memory of one purpose, used again by the next call. New arrays by the megabyte for every spectrum would keep
 * the collector busy for a third of the time. Whoever takes it is done with it before taking it again and keeps nothing
 * of it, and it comes zeroed: no answer depends on what was measured before.
 */
export class Scratch {
  #values = new Float64Array(0);

  /** Zeros, as `new Float64Array(length)` gives; valid until the next `take`. */
  take(length: number): Float64Array {
    if (this.#values.length < length) this.#values = new Float64Array(Math.ceil(1.25 * length));
    return this.#values.subarray(0, length).fill(0);
  }
}

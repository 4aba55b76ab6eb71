/** Bytes of a stream, by number: so many at once, or as they come. */
export class ByteFeed {
  private readonly source: AsyncIterator<Uint8Array>;
  private held: Uint8Array = new Uint8Array(0);

  /** @param cut makes the error for a stream that ends where bytes should be */
  constructor(
    source: AsyncIterable<Uint8Array>,
    private readonly cut: () => Error,
  ) {
    this.source = source[Symbol.asyncIterator]();
  }

  /** Exactly `count` bytes, a few kilobytes at most; null where the stream ends before the first. */
  async takeOrEnd(count: number): Promise<Uint8Array | null> {
    const taken = new Uint8Array(count);
    let filled = 0;
    while (filled < count) {
      if (!(await this.fill())) {
        if (filled === 0) return null;
        throw this.cut();
      }
      const part = this.held.subarray(0, count - filled);
      taken.set(part, filled);
      filled += part.length;
      this.held = this.held.subarray(part.length);
    }
    return taken;
  }

  async take(count: number): Promise<Uint8Array> {
    if (count === 0) return new Uint8Array(0);
    const taken = await this.takeOrEnd(count);
    if (!taken) throw this.cut();
    return taken;
  }

  /** The next `rest.bytes` bytes as they come; `rest` says how many were not asked for yet. */
  async *upTo(rest: { bytes: number }): AsyncGenerator<Uint8Array> {
    while (rest.bytes > 0) {
      if (!(await this.fill())) throw this.cut();
      const part = this.held.subarray(0, rest.bytes);
      this.held = this.held.subarray(part.length);
      rest.bytes -= part.length;
      yield part;
    }
  }

  async skip(count: number): Promise<void> {
    const rest = { bytes: count };
    for await (const part of this.upTo(rest)) void part;
  }

  /** Lets the source go. */
  async end(): Promise<void> {
    await this.source.return?.();
  }

  private async fill(): Promise<boolean> {
    while (this.held.length === 0) {
      const { done, value } = await this.source.next();
      if (done) return false;
      this.held = value;
    }
    return true;
  }
}

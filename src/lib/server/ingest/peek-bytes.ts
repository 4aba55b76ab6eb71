import type { Readable } from 'node:stream';

export interface Peeked {
  /** The first bytes, up to the number asked for; fewer where there are no more. */
  head: Uint8Array;
  /** True where the head is all there is: the stream is read to its end. */
  isWhole: boolean;
  /** All bytes, the first included. */
  whole: AsyncIterable<Uint8Array>;
  /** Lets the stream go where it stands; the rest of it may then be drained by its owner. */
  release(): Promise<void>;
}

/** Looks at the first bytes of a stream and gives it back whole. */
export async function peekBytes(source: Readable | AsyncIterable<Uint8Array>, count: number): Promise<Peeked> {
  const chunks = 'iterator' in source ? source.iterator({ destroyOnReturn: false }) : source;
  const iterator = (chunks as AsyncIterable<Uint8Array>)[Symbol.asyncIterator]();
  const first: Uint8Array[] = [];
  let held = 0;
  let ended = false;
  while (held < count && !ended) {
    const { done, value } = await iterator.next();
    if (done) ended = true;
    else {
      first.push(value);
      held += value.length;
    }
  }
  async function* whole(): AsyncGenerator<Uint8Array> {
    yield* first;
    while (!ended) {
      const { done, value } = await iterator.next();
      if (done) ended = true;
      else yield value;
    }
  }
  const head = first.length === 1 ? first[0] : Buffer.concat(first);
  return {
    head: head.subarray(0, count),
    isWhole: ended && held <= count,
    whole: whole(),
    release: async () => {
      await iterator.return?.();
    },
  };
}

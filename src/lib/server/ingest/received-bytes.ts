/** A connection that brings no byte for this long is taken for broken, so that another may go on. */
const SILENCE_MS = 15_000;

/**
 * The bytes of a request's body as they come. A connection that breaks or falls silent ends them without an error: what
 * came is kept, and nobody is there to hear a complaint.
 */
export async function* receivedBytes(body: ReadableStream<Uint8Array>): AsyncGenerator<Uint8Array> {
  const reader = body.getReader();
  try {
    for (;;) {
      let timer: ReturnType<typeof setTimeout> | undefined;
      const silence = new Promise<{ done: true; value: undefined }>((resolve) => {
        timer = setTimeout(() => resolve({ done: true, value: undefined }), SILENCE_MS);
      });
      const { done, value } = await Promise.race([
        reader.read().catch(() => ({ done: true as const, value: undefined })),
        silence,
      ]);
      clearTimeout(timer);
      if (done || !value) return;
      yield value;
    }
  } finally {
    reader.cancel().catch(() => {});
  }
}

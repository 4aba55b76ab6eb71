import type { Readable } from 'node:stream';

/** Where submitted bytes live, addressed by their SHA-256. Objects are never changed and never overwritten. */
export interface ObjectStore {
  /**
   * Takes a stream in, hashing as it goes. Resolves once the bytes are safe under their SHA-256.
   * Rejects with a Refusal `too-large` past `maxBytes`, and leaves nothing behind then.
   */
  put(stream: Readable | AsyncIterable<Uint8Array>, maxBytes: number): Promise<{ sha256: string; sizeBytes: number }>;
  /** Moves a file of this machine in, whose SHA-256 the caller has computed. The file is gone then. */
  adopt(path: string, sha256: string): Promise<void>;
  /** All bytes of an object; throws if there is none. */
  read(sha256: string): Promise<Uint8Array>;
  has(sha256: string): Promise<boolean>;
  /** Throws unless objects can be written now. */
  check(): Promise<void>;
}

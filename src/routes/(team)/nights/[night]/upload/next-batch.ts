/** Small files share a request, up to this many and this many bytes; a larger one goes alone. Few, so that progress is seen. */
export const BATCH_FILES = 12;
export const BATCH_BYTES = 8 * 1024 * 1024;

export interface Waiting {
  /** Last part of the path: the name the server sees. */
  name: string;
  sizeBytes: number;
  /** A file whose batch was refused as a whole goes alone, so that its own reason is told. */
  alone: boolean;
}

/**
 * How many files from the front of the queue go into the next request: 0 only for an empty queue. No two of one name
 * share a request, since the answer tells them apart by name.
 */
export function nextBatch(waiting: readonly Waiting[], maxFiles = BATCH_FILES, maxBytes = BATCH_BYTES): number {
  if (waiting.length === 0) return 0;
  if (waiting[0].alone) return 1;
  const names = new Set<string>();
  let bytes = 0;
  let count = 0;
  for (const { name, sizeBytes, alone } of waiting) {
    bytes += sizeBytes;
    if (count > 0 && (alone || names.has(name) || bytes > maxBytes)) break;
    names.add(name);
    count++;
    if (count === maxFiles) break;
  }
  return count;
}

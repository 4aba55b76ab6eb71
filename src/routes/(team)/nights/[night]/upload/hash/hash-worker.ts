/// <reference lib="webworker" />
import { digestFile } from './digest-file';

export interface HashRequest {
  id: number;
  file: File;
}
export type HashReply = { id: number; read: number } | { id: number; sha256: string } | { id: number; failed: true };

/** Runs beside the page: reads files and digests them, several at once as they are asked for. */
self.onmessage = async ({ data: { id, file } }: MessageEvent<HashRequest>) => {
  const reply = (message: HashReply) => self.postMessage(message);
  try {
    reply({ id, sha256: await digestFile(file, (read) => reply({ id, read })) });
  } catch {
    reply({ id, failed: true });
  }
};

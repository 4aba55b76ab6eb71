import { digestFile } from './digest-file';
import type { HashReply, HashRequest } from './hash-worker';

/** Files in the worker at once: reading the next overlaps with digesting this one. */
const AT_ONCE = 6;

/** The SHA-256 of a file, or null where the browser can't read it any more. */
export type HashFile = (file: File, onRead: (bytes: number) => void) => Promise<string | null>;

interface Asked {
  file: File;
  onRead: (bytes: number) => void;
  done: (sha256: string | null) => void;
}

/**
 * Digests files beside the page, a few at a time in the order asked. The worker is made at the first; where it can't be
 * had, the page does it by itself.
 */
export function makeHasher(): HashFile {
  let worker: Worker | undefined;
  let made = 0;
  const asked = new Map<number, Asked>();
  const queue: Asked[] = [];

  const settle = (id: number, sha256: string | null) => {
    const entry = asked.get(id);
    if (!entry) return;
    asked.delete(id);
    entry.done(sha256);
    const next = queue.shift();
    if (next) ask(next);
  };
  const digestHere = (id: number, { file, onRead }: Asked) =>
    void digestFile(file, onRead).then(
      (sha256) => settle(id, sha256),
      () => settle(id, null),
    );
  let isBroken = false;
  const start = () => {
    worker = new Worker(new URL('./hash-worker.ts', import.meta.url), { type: 'module' });
    worker.onmessage = ({ data }: MessageEvent<HashReply>) => {
      if ('read' in data) asked.get(data.id)?.onRead(data.read);
      else settle(data.id, 'sha256' in data ? data.sha256 : null);
    };
    worker.onerror = () => {
      isBroken = true;
      for (const [id, entry] of [...asked]) digestHere(id, entry);
    };
  };
  const ask = (entry: Asked) => {
    const id = ++made;
    asked.set(id, entry);
    if (!worker) start();
    if (isBroken) digestHere(id, entry);
    else worker!.postMessage({ id, file: entry.file } satisfies HashRequest);
  };
  return (file, onRead) =>
    new Promise((done) => {
      const entry = { file, onRead, done };
      if (asked.size < AT_ONCE) ask(entry);
      else queue.push(entry);
    });
}

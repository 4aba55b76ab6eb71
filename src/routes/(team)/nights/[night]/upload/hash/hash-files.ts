import type { HashReply, HashRequest } from './hash-worker';

/** Files in the worker at once: reading the next overlaps with digesting this one. */
const AT_ONCE = 6;

/** The SHA-256 of a file, or null where the browser can't read it any more. */
export type HashFile = (file: File, onRead: (bytes: number) => void) => Promise<string | null>;

/** Digests files beside the page, a few at a time in the order asked. The worker is made at the first. */
export function makeHasher(): HashFile {
  let worker: Worker | undefined;
  let made = 0;
  let inHand = 0;
  const asked = new Map<number, { onRead: (bytes: number) => void; done: (sha256: string | null) => void }>();
  const queue: (() => void)[] = [];

  const settle = (id: number, sha256: string | null) => {
    asked.get(id)?.done(sha256);
    asked.delete(id);
    inHand--;
    queue.shift()?.();
  };
  const start = () => {
    worker = new Worker(new URL('./hash-worker.ts', import.meta.url), { type: 'module' });
    worker.onmessage = ({ data }: MessageEvent<HashReply>) => {
      if ('read' in data) asked.get(data.id)?.onRead(data.read);
      else settle(data.id, 'sha256' in data ? data.sha256 : null);
    };
  };
  return (file, onRead) =>
    new Promise((done) => {
      const id = ++made;
      const ask = () => {
        inHand++;
        if (!worker) start();
        asked.set(id, { onRead, done });
        worker!.postMessage({ id, file } satisfies HashRequest);
      };
      if (inHand < AT_ONCE) ask();
      else queue.push(ask);
    });
}

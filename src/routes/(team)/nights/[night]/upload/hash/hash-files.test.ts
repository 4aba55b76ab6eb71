import { createHash } from 'node:crypto';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { makeHasher } from './hash-files';
import type { HashReply, HashRequest } from './hash-worker';

const files = (count: number) => Array.from({ length: count }, (_, i) => new File([`file ${i}`], `${i}.fits`));
const digest = (i: number) => createHash('sha256').update(`file ${i}`).digest('hex');
afterEach(() => vi.unstubAllGlobals());

describe('makeHasher', () => {
  it('keeps a few files in the worker at once and answers each', async () => {
    let [inHand, most] = [0, 0];
    class FakeWorker {
      onmessage = (_: { data: HashReply }) => {};
      postMessage({ id, file }: HashRequest) {
        most = Math.max(most, ++inHand);
        setTimeout(() => {
          inHand--;
          this.onmessage({ data: file.name === '3.fits' ? { id, failed: true } : { id, sha256: file.name } });
        }, 1);
      }
    }
    vi.stubGlobal('Worker', FakeWorker);
    const hash = makeHasher();
    const digests = await Promise.all(files(20).map((file) => hash(file, () => {})));
    expect(digests.map((name, i) => name === `${i}.fits`)).toEqual(digests.map((_, i) => i !== 3));
    expect(digests[3]).toBeNull();
    expect(most).toBe(6);
  });

  it('does it in the page where the worker can’t be had', async () => {
    class BrokenWorker {
      onerror = () => {};
      postMessage() {
        setTimeout(() => this.onerror(), 1);
      }
    }
    vi.stubGlobal('Worker', BrokenWorker);
    const hash = makeHasher();
    const digests = await Promise.all(files(20).map((file) => hash(file, () => {})));
    expect(digests).toEqual(digests.map((_, i) => digest(i)));
  });
});

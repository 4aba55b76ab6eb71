import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { sendChunks } from './send-chunks';

const CHUNK = 4 * 1024 * 1024;
const file = new File([new Uint8Array(9_500_000)], 'big.fits');

/** A server that holds one upload; `fault` decides what goes wrong with a chunk. */
let received: number;
let fault: (offset: number) => 'break' | 'busy' | 'elsewhere' | null;
let chunks: { offset: number; bytes: number; isLast: string }[];
let opened: Record<string, string>[];

const state = () => ({
  ...{ id: 'u', name: 'big.fits', sizeBytes: file.size, receivedBytes: received, unpacked: null },
  state: received === file.size ? 'done' : 'open',
  file: received === file.size ? { id: 'f', sha256: 'a', already: false } : null,
});

class FakeRequest {
  upload = {} as { onprogress: (event: { loaded: number }) => void };
  onload = () => {};
  onerror = () => {};
  onabort = () => {};
  status = 0;
  responseText = '';
  private headers: Record<string, string> = {};
  open() {}
  abort() {
    this.onabort();
  }
  setRequestHeader(name: string, value: string) {
    this.headers[name] = value;
  }
  getResponseHeader() {
    return this.status === 409 ? String(received) : null;
  }
  send(chunk: Blob) {
    const offset = Number(this.headers['upload-offset']);
    chunks.push({ offset, bytes: chunk.size, isLast: this.headers['upload-complete'] });
    setTimeout(() => {
      const wrong = fault(offset);
      if (wrong === 'break') return this.onerror();
      this.upload.onprogress({ loaded: chunk.size });
      if (wrong === 'elsewhere') received += 1_000_000;
      this.status = wrong ? 409 : 200;
      if (!wrong) received = offset + chunk.size;
      this.responseText = JSON.stringify(wrong ? { detail: 'no' } : state());
      this.onload();
    }, 1);
  }
}

beforeEach(() => {
  vi.useFakeTimers({ toFake: ['setTimeout', 'clearTimeout'] });
  [received, fault, chunks, opened] = [0, () => null, [], []];
  vi.stubGlobal('XMLHttpRequest', FakeRequest);
  vi.stubGlobal('fetch', async (_: string, init?: RequestInit) => {
    if (init?.method === 'POST') opened.push(init.headers as Record<string, string>);
    return new Response(JSON.stringify(state()), { status: init?.method === 'POST' ? 201 : 200 });
  });
});
afterEach(() => {
  vi.useRealTimers();
  vi.unstubAllGlobals();
});

async function send(signal = new AbortController().signal) {
  const told: number[] = [];
  const sent = sendChunks('night', { file, name: 'étoile.fits', sha256: 'ba'.repeat(32) }, signal, (n) => told.push(n));
  for (let i = 0; i < 60; i++) await vi.advanceTimersByTimeAsync(1_000);
  return { result: await sent, told };
}

describe('sendChunks', () => {
  it('sends a file chunk by chunk, the last one named as such', async () => {
    const { result, told } = await send();
    expect(chunks).toEqual([
      { offset: 0, bytes: CHUNK, isLast: '?0' },
      { offset: CHUNK, bytes: CHUNK, isLast: '?0' },
      { offset: 2 * CHUNK, bytes: file.size - 2 * CHUNK, isLast: '?1' },
    ]);
    expect(result).toMatchObject({ kind: 'answered', answer: { files: [{ name: 'étoile.fits', already: false }] } });
    expect(told.at(-1)).toBe(file.size);
    expect(opened[0]).toMatchObject({
      'upload-length': '9500000',
      'content-disposition': "attachment; filename*=UTF-8''%C3%A9toile.fits",
      'repr-digest': `sha-256=:${Buffer.from('ba'.repeat(32), 'hex').toString('base64')}:`,
    });
  });

  it('goes on where an earlier try left it', async () => {
    received = 5_000_000;
    await send();
    expect(chunks.map(({ offset }) => offset)).toEqual([5_000_000, 5_000_000 + CHUNK]);
  });

  it('goes where the server says it stands', async () => {
    fault = () => (received === 0 ? 'elsewhere' : null);
    const { result } = await send();
    expect(chunks.slice(0, 2).map(({ offset }) => offset)).toEqual([0, 1_000_000]);
    expect(result.kind).toBe('answered');
  });

  it('waits while another request holds the upload, as after a reload', async () => {
    fault = () => (chunks.length < 4 ? 'busy' : null);
    const { result } = await send();
    expect(chunks.map(({ offset }) => offset)).toEqual([0, 0, 0, 0, CHUNK, 2 * CHUNK]);
    expect(result.kind).toBe('answered');
  });

  it('gives a broken connection back to be tried again, and a cancelled one as such', async () => {
    fault = (offset) => (offset > 0 ? 'break' : null);
    expect((await send()).result).toEqual({ kind: 'broken', what: 'The connection broke.' });
    const stopped = AbortSignal.abort();
    expect((await send(stopped)).result).toEqual({ kind: 'cancelled' });
  });
});

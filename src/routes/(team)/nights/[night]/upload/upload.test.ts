import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import type { Checker, Verdict } from './checker';
import { collectChosen } from './collect-dropped';
import type { UploadEntry } from './upload-entry.svelte';
import { Upload } from './upload.svelte';

type Reply = { status: number; body: unknown } | 'broken' | 'never';
type Answer = (names: string[]) => Reply;

const taken = (names: string[]): Reply => ({
  status: 202,
  body: { files: names.map((name) => ({ name, already: false })), refused: [] },
});

/** Requests as the browser would send them, answered by the test. */
let answer: Answer;
let requests: string[][];
let atOnce: number;
let most: number;

class FakeRequest {
  upload = {} as { onprogress: (event: { loaded: number; total: number }) => void };
  onload = () => {};
  onerror = () => {};
  onabort = () => {};
  status = 0;
  responseText = '';
  open() {}
  abort() {
    atOnce--;
    this.onabort();
  }
  send(form: FormData) {
    const names = form.getAll('file').map((file) => (file as File).name);
    requests.push(names);
    most = Math.max(most, ++atOnce);
    const reply = answer(names);
    if (reply === 'never') return;
    setTimeout(() => {
      atOnce--;
      if (reply === 'broken') return this.onerror();
      this.status = reply.status;
      this.responseText = JSON.stringify(reply.body);
      this.onload();
    }, 10);
  }
}

const files = (count: number) =>
  collectChosen(
    Array.from({ length: count }, (_, i) => new File(['x'.repeat(100)], `${String(i).padStart(4, '0')}.fits`)),
  );
const upload = (count: number) => {
  const made = new Upload('night');
  made.add(files(count));
  return made;
};
const states = (made: Upload) => made.entries.map(({ state }) => state);

beforeEach(() => {
  vi.useFakeTimers({ toFake: ['setTimeout', 'clearTimeout', 'performance'] });
  vi.stubGlobal('XMLHttpRequest', FakeRequest);
  [answer, requests, atOnce, most] = [taken, [], 0, 0];
});
afterEach(() => {
  vi.useRealTimers();
  vi.unstubAllGlobals();
});

/** Lets requests and the reading of files come to an end. */
const pass = async (milliseconds: number) => {
  for (let i = 0; i < milliseconds; i += 10) {
    await vi.advanceTimersByTimeAsync(10);
    await new Promise((resolve) => setImmediate(resolve));
  }
};

describe('Upload', () => {
  it('sends every file once, three requests at a time', async () => {
    const made = upload(100);
    await pass(500);
    expect(requests.flat().sort()).toEqual(files(100).found.map(({ path }) => path));
    expect(most).toBe(3);
    expect(made.tally).toMatchObject({ taken: 100, waiting: 0, sending: 0, total: 100 });
    expect(made.active).toBe(false);
    expect(made.bytesSent).toBe(10_000);
  });

  it('tells the fate of each file apart', async () => {
    answer = () => ({
      status: 202,
      body: {
        files: [{ name: '0001.fits', already: true }],
        refused: [{ name: '0000.fits', what: '0000.fits is empty.', mend: 'Write it again.' }],
      },
    });
    const made = upload(2);
    await pass(100);
    expect(states(made)).toEqual(['refused', 'already']);
    expect(made.entries[0]).toMatchObject({ what: '0000.fits is empty.', mend: 'Write it again.' });
  });

  it('sends the files of a batch that was refused whole one by one, so that each hears its own reason', async () => {
    answer = (names) => ({ status: 422, body: { detail: `${names[0]} is empty.`, mend: 'Write it again.' } });
    const made = upload(3);
    await pass(500);
    expect(made.entries.map(({ what }) => what)).toEqual([
      '0000.fits is empty.',
      '0001.fits is empty.',
      '0002.fits is empty.',
    ]);
    expect(requests.map(({ length }) => length)).toEqual([3, 1, 1, 1]);
  });

  it('stops at once where the night may not be added to', async () => {
    answer = () => ({ status: 403, body: { detail: 'This needs the role observer.', mend: 'Ask a curator for it.' } });
    const made = upload(500);
    await pass(500);
    expect(new Set(states(made))).toEqual(new Set(['refused']));
    expect(requests).toHaveLength(3);
  });

  it('tries again after a break, pauses when it goes on, and loses nothing', async () => {
    answer = () => 'broken';
    const made = upload(30);
    await pass(20_000);
    expect(made.paused).toBe('The connection broke.');
    expect(made.tally).toMatchObject({ waiting: 30, taken: 0 });
    answer = taken;
    await pass(20_000);
    expect(made.paused).toBeNull();
    expect(made.tally).toMatchObject({ waiting: 0, taken: 30 });
  });

  it('takes a server that answers with 503 for a break, not for a refusal', async () => {
    answer = () => ({ status: 503, body: { detail: 'The database is away.' } });
    const made = upload(1);
    await pass(500);
    expect(states(made)).toEqual(['waiting']);
    answer = taken;
    await pass(2_000);
    expect(states(made)).toEqual(['taken']);
  });

  it('leaves out a file that the browser can no longer read, and sends the others of its batch', async () => {
    const made = new Upload('night');
    const gone = new File(['x'], '0001.fits');
    gone.slice = () => ({ arrayBuffer: () => Promise.reject(new Error('gone')) }) as unknown as Blob;
    answer = (names) => (names.includes('0001.fits') ? 'broken' : taken(names));
    const collected = files(3);
    collected.found[1] = { file: gone, path: '0001.fits' };
    made.add(collected);
    await pass(3_000);
    expect(states(made)).toEqual(['taken', 'refused', 'taken']);
  });

  it('gives a file up that no answer ever names, instead of sending it for ever', async () => {
    answer = () => taken([]);
    const made = upload(2);
    await pass(500);
    expect(states(made)).toEqual(['refused', 'refused']);
    expect(requests.length).toBeLessThan(10);
  });

  it('takes one file back, and sends the others', async () => {
    const made = upload(50);
    made.cancelOne(made.entries[49]);
    await pass(500);
    expect(made.tally).toMatchObject({ taken: 49, cancelled: 1 });
    expect(requests.flat()).not.toContain('0049.fits');
  });

  it('sends nothing that the checker finds there already or refuses', async () => {
    const checker = {
      check: async (entries: UploadEntry[], settle: (entry: UploadEntry, verdict: Verdict) => void) => {
        settle(entries[0], { state: 'already' });
        settle(entries[1], { state: 'refused', what: 'It is empty.', mend: 'Write it again.' });
        settle(entries[2], { state: 'send' });
      },
    } as unknown as Checker;
    const made = new Upload('night', checker);
    made.add(files(3));
    await pass(100);
    expect(states(made)).toEqual(['already', 'refused', 'taken']);
    expect(requests).toEqual([['0002.fits']]);
  });

  it('takes back what has no answer yet when cancelled, and sends just that when asked', async () => {
    let first = true;
    answer = (names) => {
      const reply = first ? taken(names) : 'never';
      first = false;
      return reply;
    };
    const made = upload(50);
    await pass(50);
    const before = made.tally.taken;
    expect(before).toBeGreaterThan(0);
    made.cancel();
    await pass(50);
    expect(made.tally).toMatchObject({ taken: before, cancelled: 50 - before, sending: 0, waiting: 0 });
    [answer, requests] = [taken, []];
    made.sendCancelled();
    await pass(500);
    expect(made.tally.taken).toBe(50);
    expect(requests.flat()).toHaveLength(50 - before);
  });
});

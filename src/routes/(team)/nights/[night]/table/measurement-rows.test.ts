import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { MeasurementRows } from './measurement-rows.svelte';

const json = (body: unknown, status = 200) => new Response(JSON.stringify(body), { status });
let fetched: string[];
let answer: (url: string) => Response | Promise<Response>;

beforeEach(() => {
  vi.useFakeTimers({ toFake: ['setTimeout', 'clearTimeout', 'performance'] });
  fetched = [];
  vi.stubGlobal('fetch', (url: string) => {
    fetched.push(url);
    return Promise.resolve(answer(url));
  });
});
afterEach(() => {
  vi.useRealTimers();
  vi.unstubAllGlobals();
});

describe('MeasurementRows', () => {
  it('reads page after page until there is no next', async () => {
    answer = (url) =>
      url.includes('cursor=two')
        ? json({ rows: [{ spectrum: 'b' }], next: null })
        : json({ rows: [{ spectrum: 'a' }], next: 'two' });
    const measurements = new MeasurementRows('night');
    measurements.want(1);
    await vi.advanceTimersByTimeAsync(10);
    expect(measurements.rows.map(({ spectrum }) => spectrum)).toEqual(['a', 'b']);
  });

  it('reads once for many changes in a short time', async () => {
    answer = () => json({ rows: [], next: null });
    const measurements = new MeasurementRows('night');
    for (let revision = 1; revision <= 20; revision++) {
      measurements.want(revision);
      await vi.advanceTimersByTimeAsync(50);
    }
    await vi.advanceTimersByTimeAsync(10_000);
    expect(fetched.length).toBe(2);
  });

  it('keeps the rows it has through a fault, says so, and reads again by itself', async () => {
    answer = () => json({ rows: [{ spectrum: 'a' }], next: null });
    const measurements = new MeasurementRows('night');
    measurements.want(1);
    await vi.advanceTimersByTimeAsync(3_000);
    answer = () => json({ detail: 'The database is away.' }, 503);
    measurements.want(2);
    await vi.advanceTimersByTimeAsync(10);
    expect([measurements.fault, measurements.rows.length]).toEqual(['The database is away.', 1]);
    answer = () => json({ rows: [{ spectrum: 'a' }, { spectrum: 'b' }], next: null });
    await vi.advanceTimersByTimeAsync(5_000);
    expect([measurements.fault, measurements.rows.length]).toEqual([null, 2]);
  });

  it('reads no more after it was stopped', async () => {
    answer = () => json({ rows: [], next: null });
    const measurements = new MeasurementRows('night');
    measurements.want(1);
    await vi.advanceTimersByTimeAsync(10);
    measurements.want(2);
    measurements.stop();
    await vi.advanceTimersByTimeAsync(10_000);
    expect(fetched.length).toBe(1);
  });
});

import { describe, expect, it } from 'vitest';
import type { NightMeasurement } from '$lib/domain/night';
import { skyChecksOf } from './sky-checks-of';

const row = (more: object) =>
  ({
    spectrum: 'a',
    name: 'HZ-1',
    source: 'a.fits',
    midExposure: null,
    skyOffsetKms: null,
    ...more,
  }) as NightMeasurement;

describe('skyChecksOf', () => {
  it('leaves out spectra without sky lines and keeps those without a time', () => {
    const rows = [
      row({}),
      row({ spectrum: 'b', skyOffsetKms: 0, skyScatterKms: 2 }),
      row({ spectrum: 'c', skyOffsetKms: -3, skyScatterKms: 1, midExposure: '2026-11-15T00:00:00.000Z' }),
    ];
    expect(skyChecksOf(rows)).toEqual([
      { id: 'b', name: 'HZ-1', timeMs: null, offsetKms: 0, scatterKms: 2 },
      { id: 'c', name: 'HZ-1', timeMs: Date.parse('2026-11-15'), offsetKms: -3, scatterKms: 1 },
    ]);
  });
});

import { describe, expect, it } from 'vitest';
import { exposureSpan } from './exposure-span';

const jd = (iso: string) => Date.parse(iso) / 86_400_000 + 2_440_587.5;
const iso = (julianDate: number) => new Date(Math.round((julianDate - 2_440_587.5) * 86_400_000)).toISOString();

describe('exposureSpan', () => {
  it('takes start and end where the header has them', () => {
    const span = exposureSpan({ 'DATE-OBS': '2026-09-15T00:24:10', 'DATE-END': '2026-09-15T01:11:10' }, null, 2700)!;
    expect([iso(span.start), iso(span.end)]).toEqual(['2026-09-15T00:24:10.000Z', '2026-09-15T01:11:10.000Z']);
  });

  it('mirrors the start at mid-exposure, so that readouts within a stack count', () => {
    const span = exposureSpan({ 'DATE-OBS': '2026-09-15T00:24:10' }, jd('2026-09-15T00:47:40Z'), 2700)!;
    expect(iso(span.end)).toBe('2026-09-15T01:11:10.000Z');
  });

  it('takes half the exposure on either side where only its middle is known, and other time scales to UTC', () => {
    const span = exposureSpan({}, jd('2026-09-15T00:10:00Z'), 600)!;
    expect([iso(span.start), iso(span.end)]).toEqual(['2026-09-15T00:05:00.000Z', '2026-09-15T00:15:00.000Z']);
    const tai = exposureSpan({ 'MJD-OBS': 61298, 'MJD-END': 61298.01, TIMESYS: 'TAI' }, null, null)!;
    expect((jd('2026-09-15T00:00:00Z') - tai.start) * 86_400).toBeCloseTo(37, 2);
  });

  it('returns null where nothing says when', () => {
    expect(exposureSpan({ 'DATE-OBS': '2026-09-15' }, null, 900)).toBeNull();
  });
});

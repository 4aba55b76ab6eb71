import { describe, expect, it } from 'vitest';
import { airmass } from './airmass';
import { darkHours, noonToNoon } from './dark-hours';
import { hoursAbove } from './hours-above';

const site = { latitudeDegrees: -31.27, longitudeEastDegrees: -70.81, heightMetres: 2380 };
const night = darkHours('2026-09-14', site)!;

describe('darkHours', () => {
  it('lies between the noons of the night at the site, wherever longitude is counted from', () => {
    const noons = noonToNoon('2026-09-14', site);
    expect(new Date(noons.fromMs).toISOString().slice(0, 16)).toBe('2026-09-14T16:43');
    expect(night.fromMs).toBeGreaterThan(noons.fromMs);
    expect(night.untilMs).toBeLessThan(noons.untilMs);
    expect(darkHours('2026-09-14', { ...site, longitudeEastDegrees: 289.19 })).toEqual(night);
  });
  it('does not exist in a polar summer or a polar night', () => {
    const north = { latitudeDegrees: 78, longitudeEastDegrees: 15, heightMetres: 0 };
    expect(darkHours('2026-06-20', north)).toBeNull();
    expect(darkHours('2026-06-20', { ...north, latitudeDegrees: -89.9 })).toBeNull();
  });
});

describe('hoursAbove', () => {
  it('ends where the airmass is the one asked for', () => {
    const place = { raDegrees: 338.1, decDegrees: -28.9 };
    const [span, ...more] = hoursAbove(place, site, night, 2);
    expect(more).toEqual([]);
    expect(span.untilMs).toBeLessThan(night.untilMs);
    expect(airmass(place, site, span.untilMs)).toBeCloseTo(2, 3);
    expect(airmass(place, site, (span.fromMs + span.untilMs) / 2)).toBeLessThan(2);
  });
  it('is the whole night for the pole overhead and nothing for the other one', () => {
    const south = { ...site, latitudeDegrees: -60 };
    expect(hoursAbove({ raDegrees: 0, decDegrees: -90 }, south, night, 2)).toEqual([night]);
    expect(hoursAbove({ raDegrees: 0, decDegrees: 90 }, south, night, 2)).toEqual([]);
    expect(airmass({ raDegrees: 0, decDegrees: 90 }, south, night.fromMs)).toBe(Infinity);
  });
  it('is two stretches where a place dips in the middle of the span', () => {
    const day = { fromMs: night.fromMs, untilMs: night.fromMs + 86_164_000 };
    const spans = hoursAbove({ raDegrees: 338.1, decDegrees: -28.9 }, site, day, 2);
    expect(spans).toHaveLength(2);
    expect(spans[0].untilMs).toBeLessThan(spans[1].fromMs);
  });
});

import { describe, expect, it } from 'vitest';
import { dateOfPrecedingNoon } from './preceding-noon';

describe('dateOfPrecedingNoon', () => {
  it.each([
    ['2026-11-15T04:00:00Z', '2026-11-14'],
    ['2026-11-14T23:30:00Z', '2026-11-14'],
    ['2026-11-15T11:59:59Z', '2026-11-14'],
    ['2026-11-15T12:00:00Z', '2026-11-15'],
    ['2027-01-01T03:00:00Z', '2026-12-31'],
  ])('names the night running at %s by %s', (moment, date) => {
    expect(dateOfPrecedingNoon(new Date(moment))).toBe(date);
  });
});

import { describe, expect, it } from 'vitest';
import { identifierWithin, newIdentifier } from './identifier';

describe('newIdentifier', () => {
  it('makes UUIDs of version 7 and the RFC 9562 variant', () => {
    expect(newIdentifier()).toMatch(/^[0-9a-f]{8}-[0-9a-f]{4}-7[0-9a-f]{3}-[89ab][0-9a-f]{3}-[0-9a-f]{12}$/);
  });

  it('sorts in the order of making, ten thousand within a few milliseconds', () => {
    const made = Array.from({ length: 10_000 }, () => newIdentifier());
    expect([...made].sort()).toEqual(made);
    expect(new Set(made).size).toBe(made.length);
  });

  it('keeps its order when the clock steps back', () => {
    const before = newIdentifier();
    expect(newIdentifier(Date.now() - 60_000) > before).toBe(true);
  });
});

describe('identifierWithin', () => {
  it('lies between two others in time, and has no counter that one made in its turn would not begin with', () => {
    const low = newIdentifier();
    const high = newIdentifier(Date.now() + 60_000);
    const time = (id: string) => id.replaceAll('-', '').slice(0, 12);
    for (let i = 0; i < 200; i++) {
      const made = identifierWithin(low, high);
      expect(made).toMatch(/^[0-9a-f]{8}-[0-9a-f]{4}-7[0-7][0-9a-f]{2}-[89ab][0-9a-f]{3}-[0-9a-f]{12}$/);
      expect(time(made) >= time(low) && time(made) <= time(high)).toBe(true);
    }
  });
});

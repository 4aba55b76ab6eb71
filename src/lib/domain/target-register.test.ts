import { describe, expect, it } from 'vitest';
import { foldName } from './target-name';
import { TargetRegister, type KnownTarget } from './target-register';

const ARCSEC = 1 / 3600;

function known(id: string, name: string, ra: number | null, dec: number | null, isListed = false): KnownTarget {
  return { id, name, raDegrees: ra, decDegrees: dec, isListed, folded: [foldName(name)] };
}

function register(...targets: KnownTarget[]): TargetRegister {
  const made = new TargetRegister(1);
  for (const target of targets) made.add(target);
  return made;
}

const at = (name: string, raDegrees: number | null, decDegrees: number | null) => ({ name, raDegrees, decDegrees });

describe('TargetRegister', () => {
  it('takes a place within the radius for the target, whatever the name', () => {
    const targets = register(known('a', 'J0412.6-3120', 63.15, -31.34));
    expect(targets.match(at('fibre 12', 63.15, -31.34 + 0.9 * ARCSEC), 3)?.id).toBe('a');
    expect(targets.match(at('fibre 12', 63.15, -31.34 + 1.1 * ARCSEC), 3)).toBeNull();
  });

  it('measures the radius on the sky, not in right ascension', () => {
    const targets = register(known('a', 'A', 63, -60));
    expect(targets.match(at('x', 63 + 1.9 * ARCSEC, -60), 3)?.id).toBe('a');
    expect(targets.match(at('x', 63 + 2.1 * ARCSEC, -60), 3)).toBeNull();
  });

  it('finds a target across 0 h, over a zone border and at the poles', () => {
    const targets = register(
      known('wrap', 'W', 359.9999, 10),
      known('zone', 'Z', 20, 30),
      known('north', 'N', 10, 90 - 0.4 * ARCSEC),
      known('south', 'S', 200, -90),
    );
    expect(targets.match(at('x', 0.00005, 10), 3)?.id).toBe('wrap');
    expect(targets.match(at('x', 20, 30 - 0.5 * ARCSEC), 3)?.id).toBe('zone');
    expect(targets.match(at('x', 190, 90 - 0.4 * ARCSEC), 3)?.id).toBe('north');
    expect(targets.match(at('x', 20, -90 + 0.7 * ARCSEC), 3)?.id).toBe('south');
  });

  it('prefers the one of that name among two within the radius', () => {
    const targets = register(known('a', 'A', 63, -31), known('b', 'B', 63, -31 + 1.2 * ARCSEC));
    const between = -31 + 0.55 * ARCSEC;
    expect(targets.match(at('B', 63, between), 3)?.id).toBe('b');
    expect(targets.match(at('other', 63, between), 3)?.id).toBe('a');
  });

  it('makes a new target of a known name at another place, unless a list puts it within what the instrument allows', () => {
    expect(register(known('a', 'sky', 63, -31)).match(at('sky', 64, -31), 3)).toBeNull();
    const listed = register(known('a', 'A', 63, -31, true));
    expect(listed.match(at('A', 63, -31 + 2.5 * ARCSEC), 3)?.id).toBe('a');
    expect(listed.match(at('A', 63, -31 + 3.5 * ARCSEC), 3)).toBeNull();
  });

  it('goes by name where there is no place, in any spelling, and places what had none', () => {
    const targets = register(known('a', 'J0412.6-3120', null, null));
    expect(targets.match(at('j0412.6−3120', null, null), 3)?.id).toBe('a');
    const found = targets.match(at('J0412.6-3120', 63, -31), 3)!;
    targets.place(found, 63, -31);
    expect(targets.match(at('fibre 7', 63, -31), 3)?.id).toBe('a');
    expect(targets.match(at('nobody', null, null), 3)).toBeNull();
  });
});

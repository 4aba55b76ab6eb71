import { describe, expect, it } from 'vitest';
import { positionDoubt } from './position-doubt';
import { foldName } from './target-name';
import { TargetRegister } from './target-register';

const ARCSEC = 1 / 3600;
const listed = new TargetRegister(0);
for (const [name, dec] of [
  ['J0412.6-3120', -31],
  ['J0412.8-3121', -31 + 20 * ARCSEC],
] as const) {
  listed.add({ id: name, name, raDegrees: 63, decDegrees: dec, isListed: true, folded: [foldName(name)] });
}
const doubt = (name: string, dec: number | null) =>
  positionDoubt({ name, raDegrees: dec === null ? null : 63, decDegrees: dec }, 3, listed, 'a.fits');

describe('positionDoubt', () => {
  it('says which neighbour a spectrum may be swapped with', () => {
    expect(doubt('J0412.6−3120', -31 + 20.2 * ARCSEC)?.what).toBe(
      'The header puts J0412.6−3120 20.2 arcsec from where the target list has it; the list has J0412.8-3121 there, so the two may be swapped.',
    );
  });

  it('names the nearest listed target where none is at the place', () => {
    expect(doubt('J0412.6-3120', -31 - 10 * ARCSEC)?.what).toContain(
      'nearest listed target is J0412.6-3120, 10.0 arcsec',
    );
    expect(doubt('J0412.6-3120', -20)?.what).toContain('11.0 degrees from where the target list has it; no listed');
  });

  it('has no doubt within the tolerance, without a position, or about a name on no list', () => {
    expect(doubt('J0412.6-3120', -31 + 2.9 * ARCSEC)).toBeNull();
    expect(doubt('J0412.6-3120', null)).toBeNull();
    expect(doubt('somewhere', -31 + 20 * ARCSEC)).toBeNull();
  });
});

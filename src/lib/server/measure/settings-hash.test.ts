import { describe, expect, it } from 'vitest';
import type { Instrument } from '$lib/domain/instrument';
import { completeSettingsHash, currentEngine } from './settings-hash';

const engine = { version: '1.0.0', lineList: '1', settings: 'abcd1234' };
const described: Instrument = { name: 'CH-1', medium: 'air', resolvingPower: 1800, badRegionsAngstrom: [[5000, 5010]] };
const hash = (instrument?: Instrument | null, changed = {}) =>
  completeSettingsHash({ ...engine, ...changed }, instrument);

describe('completeSettingsHash', () => {
  it('is one for descriptions that say the same, whatever the order of their keys, names and reasons', () => {
    const other: Instrument = {
      badRegionsAngstrom: [[5000, 5010, 'hot column']],
      resolvingPower: 1800,
      medium: 'air',
      positionToleranceArcsec: 2,
      name: 'another',
    };
    expect(hash(other)).toBe(hash(described));
    expect(hash(null)).toBe(hash());
  });

  it('is another one for everything that bears on an answer', () => {
    const assignments = [{ names: ['a', 'b'], columns: { wavelength: 'a', flux: 'b' } }];
    const hashes = [
      hash(),
      hash(described),
      hash({ ...described, medium: 'vacuum' }),
      hash({ ...described, resolvingPower: 1801 }),
      hash({ ...described, badRegionsAngstrom: [[5000, 5011]] }),
      hash({ ...described, columns: { flux: 'f' } }),
      hash({ ...described, assignments }),
      hash(described, { lineList: '2' }),
      hash(described, { settings: 'abcd1235' }),
    ];
    expect(new Set(hashes).size).toBe(hashes.length);
  });

  it('is what the engine of this process writes', () => {
    expect(currentEngine(described)).toEqual(currentEngine({ ...described }));
    expect(currentEngine(described).settings).not.toBe(currentEngine().settings);
    expect(currentEngine().settings).toMatch(/^[0-9a-f]{64}$/);
  });
});

import { describe, expect, it } from 'vitest';
import { confidenceOf } from './confidence';

const strong = {
  probability: 0.999,
  probabilityOfNoGalaxy: 0,
  independentLines: 2,
  resolvedDoublet: false,
  unmistakableProfile: false,
  unknownIdentity: false,
  lacksBalmer: false,
  absorptionFeatures: null,
};

describe('confidenceOf', () => {
  it('calls two lines at high probability secure', () => expect(confidenceOf(strong)).toBe('secure'));
  it('never calls one line secure', () => expect(confidenceOf({ ...strong, independentLines: 1 })).toBe('probable'));
  it('takes a resolved doublet for two lines', () =>
    expect(confidenceOf({ ...strong, independentLines: 1, resolvedDoublet: true })).toBe('secure'));
  it('never calls lines of unknown identity secure', () =>
    expect(confidenceOf({ ...strong, unknownIdentity: true })).toBe('probable'));
  it('wants several absorption features', () =>
    expect(confidenceOf({ ...strong, absorptionFeatures: 1 })).toBe('probable'));
  it('says ambiguous where something is there and none where nothing is', () => {
    expect(confidenceOf({ ...strong, probability: 0.6, probabilityOfNoGalaxy: 0.4 })).toBe('ambiguous');
    expect(confidenceOf({ ...strong, probability: 0.3, probabilityOfNoGalaxy: 0.6 })).toBe('none');
  });
});

import { describe, expect, it } from 'vitest';
import { isRight, isWithinThousand, nameFeature } from './judge';
import type { KnownAnswer } from './outcome';

const known = (more: Partial<KnownAnswer>): KnownAnswer => ({
  redshift: 1,
  redshiftSystemic: null,
  secondRedshift: null,
  broad: false,
  hasEmission: true,
  bestSignalToNoise: 10,
  featuresOverFour: 2,
  redshiftBound: null,
  strongestLine: null,
  declaredErrorFactor: 1,
  artefacts: [],
  ...more,
});

describe('isRight', () => {
  it('allows 0.0005 (1 + z), and 0.003 (1 + z) for broad lines', () => {
    expect(isRight(known({}), 1.00099)).toBe(true);
    expect(isRight(known({}), 1.00101)).toBe(false);
    expect(isRight(known({ broad: true }), 1.0059)).toBe(true);
    expect(isRight(known({ broad: true }), 0.9939)).toBe(false);
  });

  it('takes anything from the peak of Lyman-alpha to the systemic redshift', () => {
    const emitter = known({ redshift: 5, redshiftSystemic: 4.99 });
    expect(isRight(emitter, 4.995)).toBe(true);
    expect(isRight(emitter, 4.98)).toBe(false);
    expect(isRight(emitter, 5.002)).toBe(true);
    expect(isRight(emitter, 5.004)).toBe(false);
  });

  it('takes either redshift of a blend', () => {
    const blend = known({ secondRedshift: 0.3 });
    expect(isRight(blend, 0.3002)).toBe(true);
    expect(isRight(blend, 0.5)).toBe(false);
  });

  it('is never right where there is nothing to find', () => {
    expect(isRight(known({ redshift: null }), 1)).toBe(false);
    expect(isWithinThousand(known({ redshift: null }), 1)).toBe(false);
  });
});

describe('isWithinThousand', () => {
  it('counts velocity, not redshift', () => {
    expect(isWithinThousand(known({}), 1 + (2 * 999) / 299792.458)).toBe(true);
    expect(isWithinThousand(known({}), 1 + (2 * 1001) / 299792.458)).toBe(false);
  });
});

describe('nameFeature', () => {
  it('gives the line that the answer makes of a feature', () => {
    expect(nameFeature(6564.61 * 1.2, 0.2)).toBe('H-alpha 6565');
    expect(nameFeature(6564.61 * 1.2, (6564.61 * 1.2) / 5008.24 - 1)).toBe('[O III] 5008');
    expect(nameFeature(6000, 0)).toBe('other');
  });
});

import { describe, expect, it } from 'vitest';
import { faultOf, listFaults } from './list-faults';
import type { Outcome } from './outcome';

const outcome = (more: {
  group?: Outcome['group'];
  confidence?: 'secure' | 'none';
  right?: boolean;
  z?: number | null;
}): Outcome => ({
  group: more.group ?? 'star-forming',
  label: `${more.group ?? 'star-forming'} 7`,
  seed: 7,
  known: {
    redshift: more.group === 'star' ? null : 1,
    redshiftSystemic: null,
    secondRedshift: null,
    broad: false,
    hasEmission: more.group !== 'star',
    bestSignalToNoise: 20,
    featuresOverFour: 3,
    redshiftBound: null,
    strongestLine: null,
    declaredErrorFactor: 1,
    artefacts: ['telluric'],
  },
  answer: {
    redshift: more.z === undefined ? 1 : more.z,
    redshiftError: 1e-4,
    probability: 0.99,
    confidence: more.confidence ?? 'secure',
    candidates: [[1, 0.99]],
    flags: [],
    noiseFactor: 1,
  },
  judged: {
    right: more.right ?? true,
    rightInThree: true,
    rightAnywhere: true,
    farOff: !(more.right ?? true) && more.z !== null,
    bestWithinThousand: true,
    redshiftPull: null,
    overBound: null,
    namedLine: null,
    linePulls: [],
  },
  milliseconds: 1,
});

describe('faultOf', () => {
  it('tells false claims, wrong answers and misses apart, and passes what is right', () => {
    expect(faultOf(outcome({}))).toBeNull();
    expect(faultOf(outcome({ group: 'star', right: false }))).toBe('claimed where nothing is');
    expect(faultOf(outcome({ right: false }))).toBe('wrong and secure');
    expect(faultOf(outcome({ right: false, z: null, confidence: 'none' }))).toBe('findable, not found');
    expect(faultOf(outcome({ group: 'star', right: false, z: null, confidence: 'none' }))).toBeNull();
  });
});

describe('listFaults', () => {
  it('names class and seed, answer and truth', () => {
    const [line] = listFaults([outcome({}), outcome({ right: false, z: 0.5 })]);
    expect(line).toBe(
      'wrong and secure: star-forming 7: z = 0.5000 (secure, 0.990), right one listed; true z = 1.0000; S/N 20.0; telluric',
    );
  });
});

import { describe, expect, it } from 'vitest';
import type { Confidence } from '$lib/domain/confidence';
import type { Group, Outcome } from './outcome';
import { score } from './score';

interface Made {
  group?: Group;
  right?: boolean;
  confidence?: Confidence;
  farOff?: boolean;
  inThree?: boolean;
  features?: number;
  pull?: number | null;
  hasEmission?: boolean;
}

function outcome(made: Made): Outcome {
  const right = made.right ?? true;
  return {
    group: made.group ?? 'star-forming',
    seed: 0,
    label: 'made',
    known: {
      redshift: 1,
      redshiftSystemic: null,
      secondRedshift: null,
      broad: false,
      hasEmission: made.hasEmission ?? true,
      bestSignalToNoise: 20,
      featuresOverFour: made.features ?? 2,
      redshiftBound: null,
      strongestLine: null,
      declaredErrorFactor: 1,
      artefacts: [],
    },
    answer: {
      redshift: 1,
      redshiftError: 1e-4,
      probability: 0.9,
      confidence: made.confidence ?? 'secure',
      candidates: [[1, 0.9]],
      flags: [],
      noiseFactor: 1,
    },
    judged: {
      right,
      rightInThree: made.inThree ?? right,
      rightAnywhere: right,
      farOff: made.farOff ?? !right,
      bestWithinThousand: right,
      redshiftPull: made.pull ?? null,
      overBound: null,
      namedLine: null,
      linePulls: [],
    },
    milliseconds: 1,
  };
}

const many = (count: number, made: Made) => Array.from({ length: count }, () => outcome(made));
const row = (outcomes: Outcome[], what: string) => score(outcomes).find((r) => r.what.startsWith(what))!;

describe('score', () => {
  it('counts right answers among findable spectra only', () => {
    const all = [...many(199, {}), ...many(1, { right: false }), ...many(50, { right: false, features: 1 })];
    expect(row(all, 'right redshift')).toMatchObject({ measured: 0.995, count: 200, reached: 'yes' });
    expect(row([...all, ...many(1, { right: false })], 'right redshift').reached).toBe('floor');
  });

  it('calls a low rate reached only with enough spectra behind it', () => {
    const wrong = 'wrong by > 1,000';
    expect(row(many(2996, {}), wrong).reached).toBe('yes');
    expect(row(many(2000, {}), wrong).reached).toBe('floor; too few to prove the goal');
    expect(row(many(100, {}), wrong).reached).toBe('too few to prove');
    expect(row([...many(3000, {}), ...many(1, { right: false })], wrong).reached).not.toBe('yes');
    expect(row([...many(300, {}), ...many(30, { right: false })], wrong).reached).toBe('no');
  });

  it('counts claims on nulls by word, not by redshift', () => {
    const nulls = [
      ...many(99, { group: 'pure noise', confidence: 'none', right: false, hasEmission: false }),
      ...many(1, { group: 'star', confidence: 'probable', right: false, hasEmission: false }),
    ];
    expect(row(nulls, 'secure or probable on nulls')).toMatchObject({ measured: 0.01, count: 100 });
  });

  it('judges pulls from both sides and asks for 800', () => {
    const pulls = (scale: number, count: number) =>
      Array.from({ length: count }, (_, i) => outcome({ pull: scale * (i % 2 ? 1 : -1) }));
    const faulty = outcome({ pull: 50 });
    faulty.known.artefacts = ['telluric'];
    expect(row([...pulls(1, 800), faulty], 'pull of z, narrow lines, clean').reached).toBe('yes');
    expect(row(pulls(0.7, 800), 'pull of z').reached).toBe('no');
    expect(row(pulls(1, 400), 'pull of z').reached).toBe('needs 800');
  });
});

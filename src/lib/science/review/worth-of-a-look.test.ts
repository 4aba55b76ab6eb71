import { describe, expect, it } from 'vitest';
import { answerEntropyBits, orderQueue, worthOfALook, type Looked } from './worth-of-a-look';

const looked = (more: Partial<Looked>): Looked => ({
  candidates: [0.9, 0.1],
  rivals: [],
  conflict: false,
  priority: 0,
  ageDays: 0,
  ...more,
});

describe('answerEntropyBits', () => {
  it('has the values of the textbook: a fair coin one bit, a fair die log2 6, certainty none', () => {
    expect(answerEntropyBits([0.5, 0.5], [])).toBeCloseTo(1, 12);
    expect(answerEntropyBits([1 / 6, 1 / 6, 1 / 6], [1 / 6, 1 / 6, 1 / 6])).toBeCloseTo(Math.log2(6), 12);
    expect(answerEntropyBits([1], [0, 0, 0])).toBe(0);
  });

  it('is 1.75 bits for 1/2, 1/4, 1/8, 1/8 (Cover & Thomas 2006, example 2.1.2)', () => {
    expect(answerEntropyBits([0.5, 0.25], [0.125, 0.125])).toBeCloseTo(1.75, 12);
  });

  it('counts what is left of the sum as one more answer', () => {
    expect(answerEntropyBits([0.5], [])).toBeCloseTo(1, 12);
    expect(answerEntropyBits([], [])).toBe(0);
  });
});

describe('orderQueue', () => {
  it('puts priority before doubt, and doubt before certainty', () => {
    const sure = looked({ candidates: [1] });
    const doubtful = looked({ candidates: [0.5, 0.5] });
    const urgent = looked({ candidates: [1], priority: 1 });
    expect(orderQueue([sure, doubtful, urgent])).toEqual([urgent, doubtful, sure]);
  });

  it('raises conflicts, and of equals the one that has waited', () => {
    expect(worthOfALook(looked({ conflict: true }))).toBeGreaterThan(worthOfALook(looked({})) + 0.9);
    const old = looked({ ageDays: 3 });
    expect(orderQueue([looked({}), old])[0]).toBe(old);
  });
});

import { describe, expect, it } from 'vitest';
import { orderQueue, priorityShares, WORTH_WEIGHTS, worthOfALook, type Looked } from './worth-of-a-look';

const looked = (more: Partial<Looked>): Looked => ({
  entropyBits: 0.5,
  conflict: false,
  priorityShare: 0,
  ageDays: 0,
  ...more,
});

describe('worthOfALook', () => {
  it('is the sum that the weights name', () => {
    expect(worthOfALook(looked({}))).toBe(0.5);
    expect(worthOfALook(looked({ conflict: true, priorityShare: 0.5, ageDays: 10 }))).toBeCloseTo(0.5 + 1 + 0.75 + 0.1);
  });

  it('stops counting age, and takes none from a clock that runs behind', () => {
    const longest = worthOfALook(looked({ ageDays: WORTH_WEIGHTS.mostAgeDays }));
    expect(worthOfALook(looked({ ageDays: 4000 }))).toBe(longest);
    expect(worthOfALook(looked({ ageDays: -3 }))).toBe(0.5);
  });

  it('is the same for all answers that must not be told', () => {
    expect(worthOfALook(looked({ entropyBits: null }))).toBe(WORTH_WEIGHTS.unknownEntropyBits);
  });
});

describe('orderQueue', () => {
  it('puts doubt before certainty, a conflict before doubt of half a bit, and the foremost target before both', () => {
    const sure = looked({ entropyBits: 0 });
    const doubtful = looked({});
    const conflict = looked({ entropyBits: 0, conflict: true });
    const foremost = looked({ entropyBits: 0, priorityShare: 1 });
    const queue = [sure, doubtful, conflict, foremost];
    expect(orderQueue(queue)).toEqual([foremost, conflict, doubtful, sure]);
    expect(queue[0]).toBe(sure);
  });

  it('of equals takes the one that has waited, else the order given', () => {
    const [a, b, old] = [looked({}), looked({}), looked({ ageDays: 3 })];
    const ordered = orderQueue([a, b, old]);
    expect(ordered[0]).toBe(old);
    expect([ordered[1] === a, ordered[2] === b]).toEqual([true, true]);
  });
});

describe('priorityShares', () => {
  it('counts order alone, on any scale', () => {
    expect([...priorityShares([100, 1, 2, 2])]).toEqual([
      [1, 0],
      [2, 0.5],
      [100, 1],
    ]);
    expect([...priorityShares([7])]).toEqual([[7, 1]]);
    expect(priorityShares([]).size).toBe(0);
  });
});

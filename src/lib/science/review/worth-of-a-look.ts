/** What the order of the review queue is made from. */
export interface Looked {
  /** Calibrated probabilities of the candidates. */
  candidates: readonly number[];
  /** Probabilities of the rivals: nothing there, star at rest, passive galaxy. */
  rivals: readonly number[];
  /** Another spectrum of the same target says something else. */
  conflict: boolean;
  /** Set by the programme; 0 is usual. */
  priority: number;
  /** Days since the spectrum was measured. */
  ageDays: number;
}

/**
 * Shannon entropy, bits, of an answer over its candidates and rivals; what is left of the sum counts as one more answer. 0 where one answer
 * has it all, or there is none.
 *
 * Source: Shannon (1948, Bell System Technical Journal 27, 379), section 6.
 *
 * @example
 * answerEntropyBits([0.5, 0.5], []); // 1
 */
export function answerEntropyBits(candidates: readonly number[], rivals: readonly number[]): number {
  const given = [...candidates, ...rivals].filter((p) => p > 0);
  if (given.length === 0) return 0;
  const sum = given.reduce((total, p) => total + p, 0);
  const all = sum < 1 ? [...given, 1 - sum] : given.map((p) => p / sum);
  return all.reduce((bits, p) => (p > 0 ? bits - p * Math.log2(p) : bits), 0);
}

/** A conflict leaves at least as much open as two answers that are equally likely. */
const CONFLICT_BITS = 1;
/** Waiting breaks ties: a day counts a thousandth of a bit, so that nothing waits for ever behind its equals. */
const BITS_A_DAY = 0.001;

/** Worth of a look, bits; priority goes before it. */
export function worthOfALook(looked: Looked): number {
  const open = answerEntropyBits(looked.candidates, looked.rivals);
  return open + (looked.conflict ? CONFLICT_BITS : 0) + BITS_A_DAY * looked.ageDays;
}

/** Queue in the order of the worth of a look: priority first, then worth, then the order given. Does not change its input. */
export function orderQueue<T extends Looked>(queue: readonly T[]): T[] {
  return [...queue].sort((a, b) => b.priority - a.priority || worthOfALook(b) - worthOfALook(a));
}

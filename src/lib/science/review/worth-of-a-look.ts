/** What the worth of a look is made from. */
export interface Looked {
  /** Shannon entropy of the calibrated answer, bits; null where it must not be told and nothing stands in for it. */
  entropyBits: number | null;
  /** Another spectrum of the same target says something else. */
  conflict: boolean;
  /** Share of the programme's priorities that lie below the target's, 0 to 1; 0 where it has none. */
  priorityShare: number;
  /** Whole days since the spectrum came in. */
  ageDays: number;
}

/**
 * All weights of the queue's order, in bits, in one place:
 *
 *     worth = entropy + conflictBits [conflict] + priorityBits x priorityShare + bitsADay x min(age, mostAgeDays)
 *
 * The entropy is what the look can settle. The rest is our choice: a conflict leaves at least as much open as two answers
 * that are equally likely; the programme's foremost target counts as much again and a half, so that it comes before every
 * doubtful spectrum of two rival answers; waiting mostly breaks ties, so that nothing waits for ever behind its equals.
 */
export const WORTH_WEIGHTS = {
  conflictBits: 1,
  priorityBits: 1.5,
  bitsADay: 0.01,
  mostAgeDays: 30,
  /** For entropies that must not be told, where there are no others to draw one from. */
  unknownEntropyBits: 1,
} as const;

/** Worth of a look, bits (`WORTH_WEIGHTS`). */
export function worthOfALook({ entropyBits, conflict, priorityShare, ageDays }: Looked): number {
  const { conflictBits, priorityBits, bitsADay, mostAgeDays, unknownEntropyBits } = WORTH_WEIGHTS;
  const waited = bitsADay * Math.min(Math.max(0, ageDays), mostAgeDays);
  return (entropyBits ?? unknownEntropyBits) + (conflict ? conflictBits : 0) + priorityBits * priorityShare + waited;
}

/** Queue in the order of the worth of a look, greatest first; equals keep the order given. Does not change its input. */
export function orderQueue<T extends Looked>(queue: readonly T[]): T[] {
  return queue
    .map((entry) => ({ entry, worth: worthOfALook(entry) }))
    .sort((a, b) => b.worth - a.worth)
    .map(({ entry }) => entry);
}

/**
 * Share of a programme's distinct priorities that lie below each: priorities are of any scale, so only their order counts.
 * The greatest of several gets 1; a single one too, since naming it at all puts it before the rest.
 *
 * @param priorities those of a programme's targets, in any order
 * @returns by priority
 */
export function priorityShares(priorities: readonly number[]): Map<number, number> {
  const sorted = [...new Set(priorities)].sort((a, b) => a - b);
  return new Map(sorted.map((priority, i) => [priority, sorted.length === 1 ? 1 : i / (sorted.length - 1)]));
}

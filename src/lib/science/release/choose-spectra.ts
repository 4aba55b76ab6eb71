import type { Answer } from './decide-spectrum';

/**
 * One answer a target. Where several spectra of it bring one, people go before the engine, then the better confidence
 * word, then the higher probability, then the later spectrum.
 *
 * @returns the chosen answers, and for how many targets there was a choice.
 */
export function chooseSpectra(answers: readonly Answer[]): { chosen: Answer[]; targetsWithChoice: number } {
  const byTarget = new Map<string, Answer[]>();
  for (const answer of answers) {
    const { targetId } = answer.spectrum;
    const found = byTarget.get(targetId);
    if (found) found.push(answer);
    else byTarget.set(targetId, [answer]);
  }
  const groups = [...byTarget.values()];
  return {
    chosen: groups.map((group) => group.reduce((best, next) => (isBetter(next, best) ? next : best))),
    targetsWithChoice: groups.filter((group) => group.length > 1).length,
  };
}

const RANK = { secure: 3, probable: 2, ambiguous: 1, none: 0 } as const;

function isBetter(a: Answer, b: Answer): boolean {
  if (a.decidedBy !== b.decidedBy) return a.decidedBy === 'people';
  if (a.confidence !== b.confidence) return RANK[a.confidence] > RANK[b.confidence];
  const [p, q] = [a.spectrum.probability ?? 0, b.spectrum.probability ?? 0];
  if (p !== q) return p > q;
  return a.spectrum.spectrumId > b.spectrum.spectrumId;
}

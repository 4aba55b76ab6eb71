import type { Outcome } from './outcome';
import { isFindable, NULL_GROUPS } from './score';

const isClaim = ({ answer }: Outcome) => answer.confidence === 'secure' || answer.confidence === 'probable';

/** Why an outcome is worth a look, worst first; null where nothing is wrong with it. */
export function faultOf(outcome: Outcome): string | null {
  if (NULL_GROUPS.includes(outcome.group) && isClaim(outcome)) return 'claimed where nothing is';
  if (isClaim(outcome) && outcome.judged.farOff) return `wrong and ${outcome.answer.confidence}`;
  if (isFindable(outcome) && !outcome.judged.right) return 'findable, not found';
  return null;
}

/** One line for each faulty outcome; class and seed are what `drawRecipe` and `simulateSpectrum` need to make the spectrum again. */
export function listFaults(outcomes: readonly Outcome[]): string[] {
  const faulty = outcomes.flatMap((outcome) => {
    const fault = faultOf(outcome);
    return fault ? [{ fault, outcome }] : [];
  });
  faulty.sort((a, b) => (a.fault < b.fault ? -1 : a.fault > b.fault ? 1 : 0));
  return faulty.map(({ fault, outcome: { label, known, answer, judged } }) => {
    const answered = answer.redshift === null ? 'no answer' : `z = ${answer.redshift.toFixed(4)}`;
    const truth = known.redshift === null ? 'no redshift' : `z = ${known.redshift.toFixed(4)}`;
    const listed = judged.rightAnywhere ? ', right one listed' : '';
    const probability = (answer.candidates[0]?.[1] ?? 0).toPrecision(3);
    return (
      `${fault}: ${label}: ${answered} (${answer.confidence}, ${probability})${listed}; true ${truth}; ` +
      `S/N ${known.bestSignalToNoise.toFixed(1)}; ${known.artefacts.join(', ') || 'no faults'}`
    );
  });
}

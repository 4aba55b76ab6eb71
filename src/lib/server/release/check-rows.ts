import type { DraftCheck } from '$lib/domain/draft-view';
import type { DraftSelection } from '$lib/domain/release';
import { DUPLICATE_RADIUS_ARCSEC, findDuplicates } from '$lib/science/release/find-duplicates';
import type { AssembledRows } from './assemble-rows';

const EXAMPLES = 20;
const named = (name: string, spectrum?: string) => ({ text: name, names: [name], spectrum });
const orList = (words: readonly string[]) => words.join(', ').replace(/, ([^,]*)$/, ' or $1');
const byText = (a: { text: string }, b: { text: string }) => (a.text < b.text ? -1 : 1);
const plural = (n: number, one: string, many: string) => `${n.toLocaleString('en-US')} ${n === 1 ? one : many}`;

/** What stands against freezing these rows, and what doesn't but is worth knowing. */
export function checkRows(assembled: AssembledRows, selection: DraftSelection, looks: number): DraftCheck[] {
  const { rows, openQuestions, unplaced, chosen } = assembled;
  const duplicates = findDuplicates(rows, selection.truePairs);
  const fewer = chosen.filter(
    ({ decidedBy, rulingId, spectrum }) =>
      decidedBy === 'people' && rulingId === null && spectrum.verdicts.length < looks,
  );
  const checks: DraftCheck[] = [
    {
      code: 'no-rows',
      blocks: true,
      count: rows.length === 0 ? 1 : 0,
      what: 'No spectrum would enter.',
      mend: 'Take in more confidence words or the engine alone, or wait for verdicts.',
      examples: [],
    },
    {
      code: 'open-questions',
      blocks: true,
      count: openQuestions.length,
      what: `${plural(openQuestions.length, 'spectrum has', 'spectra have')} verdicts that disagree.`,
      mend: 'Settle them in Review, or leave the targets out.',
      examples: openQuestions.map(({ targetName, spectrumId }) => named(targetName, spectrumId)),
    },
    {
      code: 'missing-positions',
      blocks: true,
      count: unplaced.length,
      what: `${plural(unplaced.length, 'target has', 'targets have')} no position.`,
      mend: 'Hand in files that give one, or leave the targets out.',
      examples: unplaced.map((name) => named(name)),
    },
    {
      code: 'duplicates',
      blocks: true,
      count: duplicates.length,
      what: `${plural(duplicates.length, 'pair of targets is', 'pairs of targets are')} within ${DUPLICATE_RADIUS_ARCSEC} arcsec under two names.`,
      mend: 'Leave one of each pair out, or declare it a true pair.',
      examples: duplicates.map(({ names, separationArcsec }) => ({
        text: `${names.join(' and ')}, ${separationArcsec.toFixed(2)} arcsec apart`,
        names,
      })),
    },
    {
      code: 'fewer-looks',
      blocks: false,
      count: fewer.length,
      what: `${plural(fewer.length, 'row rests', 'rows rest')} on fewer people than the ${looks} the programme asks for.`,
      mend: 'They enter all the same; have them looked at again if they should not.',
      examples: fewer.map(({ spectrum }) => named(spectrum.targetName, spectrum.spectrumId)),
    },
  ];
  return checks
    .filter(({ count }) => count > 0)
    .map((check) => ({ ...check, examples: check.examples.sort(byText).slice(0, EXAMPLES) }));
}

/** Sentences that go with the release: how its rows were chosen. */
export function notesOnRows({ rows, targetsWithChoice }: AssembledRows, selection: DraftSelection): string[] {
  const notes = [
    selection.engineAlone
      ? `Rows that nobody has looked at carry the engine's answer where it calls it ${orList(selection.confidence)}; decided_by tells them apart.`
      : 'Every row was decided by people.',
  ];
  if (targetsWithChoice > 0) {
    notes.push(
      `${plural(targetsWithChoice, 'target has', 'targets have')} several spectra: the best one is published (decided by people first, then the better confidence, then the higher probability).`,
    );
  }
  if (rows.some(({ fluxUnit }) => fluxUnit === null)) {
    notes.push('Rows of spectra with relative flux have no line fluxes.');
  }
  return notes;
}

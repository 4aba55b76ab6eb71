import type { KeptOut } from '$lib/domain/draft-view';
import type { DraftSelection } from '$lib/domain/release';
import { chooseSpectra } from '$lib/science/release/choose-spectra';
import {
  decideSpectrum,
  type Answer,
  type JudgedSpectrum,
  type StandingRuling,
  type StandingVerdict,
} from '$lib/science/release/decide-spectrum';
import { measuredSpectra, standingVerdicts } from '../database/queries/drafts-judged';
import { standingRulings } from '../database/queries/rulings';
import type { Transaction } from '../database/in-transaction';

/** What the spectra of a programme bring to a selection, before their lines are looked up. */
export interface Answers {
  chosen: Answer[];
  spectra: number;
  targetsWithChoice: number;
  keptOut: Record<KeptOut, number>;
  openQuestions: JudgedSpectrum[];
}

/** Reads spectra, measurements, standing verdicts and rulings of a programme and decides on each spectrum and target. */
export async function readAnswers(
  programmeId: string,
  selection: DraftSelection,
  transaction?: Transaction,
): Promise<Answers> {
  const spectra = await measuredSpectra(programmeId, transaction);
  const newest = new Map<string, Map<string, StandingVerdict>>();
  for (const { spectrumId, ...verdict } of await standingVerdicts(programmeId, transaction)) {
    const byPerson = newest.get(spectrumId) ?? new Map<string, StandingVerdict>();
    // Oldest first: taken out before it is put in again, a person's newest verdict stands at its own time.
    byPerson.delete(verdict.userId);
    newest.set(spectrumId, byPerson.set(verdict.userId, verdict));
  }
  const rulings = new Map<string, StandingRuling>();
  for (const { spectrumId, ...ruling } of await standingRulings([programmeId], transaction)) {
    rulings.set(spectrumId, ruling);
  }
  const keptOut: Answers['keptOut'] = {
    'left out': 0,
    'open question': 0,
    'no redshift': 0,
    'not judged': 0,
    'other confidence': 0,
    'nothing measured': 0,
  };
  const answers: Answer[] = [];
  const openQuestions: JudgedSpectrum[] = [];
  for (const row of spectra) {
    const verdicts = [...(newest.get(row.spectrumId)?.values() ?? [])];
    const spectrum = { ...row, verdicts, ruling: rulings.get(row.spectrumId) ?? null };
    const decided = decideSpectrum(spectrum, selection);
    if (typeof decided !== 'string') {
      answers.push(decided);
      continue;
    }
    keptOut[decided]++;
    if (decided === 'open question') openQuestions.push(spectrum);
  }
  return { ...chooseSpectra(answers), spectra: spectra.length, keptOut, openQuestions };
}

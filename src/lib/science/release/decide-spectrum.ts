import type { Confidence } from '$lib/domain/confidence';
import type { KeptOut } from '$lib/domain/draft-view';
import type { DraftSelection } from '$lib/domain/release';
import { standingDecision } from '../review/standing-decision';

/** A verdict that stands: the newest of its person, neither withdrawn nor superseded. */
export interface StandingVerdict {
  id: string;
  userId: string;
  measurementId: string | null;
  kind: 'candidate' | 'by hand' | 'no redshift';
  redshift: number | null;
  redshiftError: number | null;
  /** Place of the candidate in the measurement's list, from 0. */
  candidatePlace: number | null;
  confidence: Confidence | null;
  /** The verdict that this row brought back by an undo. */
  restores: string | null;
}

/** What a third person decided on verdicts that differ; stands until it is taken back. */
export interface StandingRuling extends Omit<StandingVerdict, 'restores'> {
  /** The verdict it takes; null where it says something else. */
  verdictId: string | null;
}

/** A spectrum with what the engine and people say of it. */
export interface JudgedSpectrum {
  spectrumId: string;
  targetId: string;
  targetName: string;
  ra: number | null;
  dec: number | null;
  measurementId: string | null;
  redshift: number | null;
  redshiftError: number | null;
  probability: number | null;
  confidence: Confidence | null;
  /** In the order of their time. */
  verdicts: StandingVerdict[];
  ruling: StandingRuling | null;
}

/** What a spectrum would publish. `place` null: set by hand, no candidate chosen. */
export interface Answer {
  spectrum: JudgedSpectrum;
  decidedBy: 'people' | 'engine';
  measurementId: string | null;
  verdictId: string | null;
  rulingId: string | null;
  place: number | null;
  redshift: number;
  redshiftError: number | null;
  confidence: Confidence;
}

/**
 * What one spectrum brings to a release: the ruling that settles it, else the newest standing verdict of people; where nobody has judged it and the
 * selection takes the engine alone, the measurement; else the reason why nothing.
 * Verdicts that disagree make an open question, which brings nothing until a third person rules.
 */
export function decideSpectrum(spectrum: JudgedSpectrum, selection: DraftSelection): Answer | KeptOut {
  if (selection.leaveOut?.includes(spectrum.targetName)) return 'left out';
  const { verdicts, ruling } = spectrum;
  const standing = standingDecision(verdicts, ruling);
  if (standing === 'open') return 'open question';
  const newest = verdicts.at(-1);
  if (standing === 'ruled' && ruling) {
    return answerOfPeople(spectrum, ruling, { verdictId: ruling.verdictId, rulingId: ruling.id }, selection);
  }
  if (newest) return answerOfPeople(spectrum, newest, { verdictId: newest.id, rulingId: null }, selection);
  if (spectrum.confidence === null) return 'nothing measured';
  if (spectrum.confidence === 'none' || spectrum.redshift === null) return 'no redshift';
  if (!selection.engineAlone) return 'not judged';
  if (!selection.confidence.includes(spectrum.confidence)) return 'other confidence';
  const { measurementId, redshift, redshiftError, confidence } = spectrum;
  return {
    spectrum,
    decidedBy: 'engine',
    measurementId,
    verdictId: null,
    rulingId: null,
    place: 0,
    redshift,
    redshiftError,
    confidence,
  };
}

function answerOfPeople(
  spectrum: JudgedSpectrum,
  verdict: Omit<StandingVerdict, 'restores'>,
  traces: Pick<Answer, 'verdictId' | 'rulingId'>,
  selection: DraftSelection,
): Answer | KeptOut {
  const { redshift, confidence } = verdict;
  if (redshift === null || confidence === null || confidence === 'none') return 'no redshift';
  if (!selection.confidence.includes(confidence)) return 'other confidence';
  return {
    spectrum,
    decidedBy: 'people',
    measurementId: verdict.measurementId ?? spectrum.measurementId,
    ...traces,
    place: verdict.kind === 'candidate' ? verdict.candidatePlace : null,
    redshift,
    redshiftError: verdict.redshiftError,
    confidence,
  };
}

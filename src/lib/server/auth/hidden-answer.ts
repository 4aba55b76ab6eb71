import { createHmac } from 'node:crypto';
import type { Measurement } from '$lib/domain/measurement';
import { everJudgedBy } from '../database/queries/ever-judged';
import { reviewSettings, type ReviewSettings } from '../database/queries/review-settings';
import { mayByRole, type Actor } from './permissions';

type Draw = Pick<ReviewSettings, 'seed' | 'hiddenShare'>;

/**
 * Whether a person looks at a spectrum without the engine's answer: a draw that follows from the programme's secret seed,
 * the spectrum and the person, so that loading the page again changes nothing and nobody can tell beforehand.
 */
export function isDrawnHidden({ seed, hiddenShare }: Draw, spectrumId: string, userId: string): boolean {
  if (hiddenShare <= 0 || seed === '') return false;
  return draw(seed, `${spectrumId} ${userId}`) < hiddenShare;
}

/** A number from 0 to 1 that follows from a seed and a text. */
function draw(seed: string, text: string): number {
  return createHmac('sha256', seed).update(text).digest().readUIntBE(0, 6) / 2 ** 48;
}

/**
 * An entropy that stands in for one that must not be told, drawn from those of other spectra: a hidden look then comes among
 * the rest as any might, and its place says nothing of its own answer.
 *
 * @param known entropies in rising order; null where there are none
 */
export function standInEntropy(
  { seed }: Draw,
  spectrumId: string,
  userId: string,
  known: readonly number[],
): number | null {
  return known[Math.floor(draw(seed, `${spectrumId} ${userId} place`) * known.length)] ?? null;
}

/**
 * Tells of each spectrum of a programme whether the engine's answer is hidden from someone now: drawn, and they judge by
 * role, and never gave a verdict on it. One they took back counts: the answer was shown after it. Whatever sends an
 * engine's answer to a member of a programme asks this first.
 */
export async function hiddenAnswers(reader: Actor, programmeId: string): Promise<(spectrumId: string) => boolean> {
  if (!mayByRole(reader, 'spectrum.judge', programmeId)) return () => false;
  const settings = (await reviewSettings([programmeId])).get(programmeId);
  if (!settings || settings.hiddenShare <= 0) return () => false;
  const judged = await everJudgedBy(reader.userId, programmeId);
  return (spectrumId) => !judged.has(spectrumId) && isDrawnHidden(settings, spectrumId, reader.userId);
}

/** Whether a person who judges is to look at a spectrum without the engine's answer the first time, judged by now or not. */
export async function isDrawnFor(judge: Actor, programmeId: string, spectrumId: string): Promise<boolean> {
  const settings = (await reviewSettings([programmeId])).get(programmeId);
  return !!settings && isDrawnHidden(settings, spectrumId, judge.userId);
}

/** A measurement with nothing of the engine's answer left: only what the file itself says. */
export function withoutAnswer({ fluxUnit, frame }: Measurement): Measurement {
  return {
    redshift: null,
    redshiftError: null,
    redshiftErrorMeasured: null,
    redshiftSystemic: null,
    secondRedshift: null,
    probability: 0,
    rivals: { nothing: 0, star: 0, passive: 0 },
    confidence: 'none',
    fluxUnit,
    candidates: [],
    lines: [],
    derived: null,
    reasons: [],
    flags: [],
    noiseFactor: null,
    frame,
    engine: { version: '', lineList: '', settings: '' },
  };
}

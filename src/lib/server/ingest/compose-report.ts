import { CONFIDENCE_WORDS } from '$lib/domain/confidence';
import type { AgainEntry, NightReport } from '$lib/domain/night-report';
import { Refusal } from '$lib/domain/refusal';
import { actorOf } from '../auth/actor';
import { config } from '../config/config';
import type { LetterRow } from '../database/queries/letters';
import type { Letter } from '../mail/deliver';
import { readReport } from './read-report';

/** What a letter names; the page has all. */
const TARGETS = 15;
const PROBLEMS = 10;

/** Worker use-case. The report of a night as a letter; null where the person may no longer read the night. */
export async function composeReport({ nightId, userId }: LetterRow): Promise<Letter | null> {
  const actor = userId ? await actorOf(userId) : null;
  if (!actor || !nightId) return null;
  try {
    const report = await readReport(actor, nightId, Date.now());
    const { civilDate, programme } = report.night;
    return { to: actor.email, subject: `Night of ${civilDate}, ${programme.slug}: report`, text: reportText(report) };
  } catch (error) {
    if (error instanceof Refusal) return null;
    throw error;
  }
}

function reportText({ night, again, sky }: NightReport): string {
  const words = CONFIDENCE_WORDS.map((word) => `${word} ${night.confidence[word]}`).join(', ');
  const lines = [
    `${night.programme.name}, night of ${night.civilDate}`,
    '',
    `Came in: ${night.files.total} files, ${night.spectra.total} spectra.`,
    `Measured: ${night.spectra.measured}; ${words}.`,
    sky
      ? `Sky lines: zero point ${sky.zeroPointKms.toFixed(1)} km/s, scatter ${sky.scatterKms.toFixed(1)} km/s over ${sky.count} spectra${sky.outliers.length ? `; ${sky.outliers.length} stand off` : ''}.`
      : 'Sky lines: not checked, since no spectrum brings them.',
    '',
    again.length
      ? `Point at again (${again.length}; the exposure that would make it secure):`
      : 'No target is doubtful.',
    ...again.slice(0, TARGETS).map((entry, i) => `${String(i + 1).padStart(3)}  ${againText(entry)}`),
    ...(again.length > TARGETS ? [`     and ${again.length - TARGETS} more on the page`] : []),
    '',
    night.problems.length ? `Problems (${night.problems.length}):` : 'No problems.',
    ...night.problems.slice(0, PROBLEMS).map(({ file, what, mend }) => `  ${file}: ${what} ${mend}`),
    ...(night.problems.length > PROBLEMS ? [`  and ${night.problems.length - PROBLEMS} more on the page`] : []),
    '',
    'All of it, to print, and as CSV:',
    `${config().ORIGIN}/nights/${night.id}/report`,
    '',
    'Assumed: signal-to-noise grows with the square root of exposure time, under the same sky and seeing.',
  ];
  return lines.join('\n');
}

function againText({ name, confidence, needed, exposureSeconds }: AgainEntry): string {
  const bound = needed?.atLeast ? 'over ' : '';
  const more =
    needed === null
      ? 'not known: its lines do not tell'
      : needed.extraSeconds === null
        ? `${bound}${needed.factor.toFixed(1)} times the present exposure`
        : `${bound}${Math.ceil(needed.extraSeconds)} s more, on ${exposureSeconds} s`;
  return `${name}, ${confidence}: ${more}`;
}

import { darkHours } from '$lib/science/derive/dark-hours';
import { inTransaction } from '../database/in-transaction';
import { nightsAtRest, type NightAtRest } from '../database/queries/night-report';
import { mailIsConfigured } from '../mail/deliver';
import { postLetter } from '../mail/post-letter';
import { nudge } from '../queue/nudge';

/** Longer than the pause between two files of one upload or two read-outs of a run of short exposures. */
const QUIET_SECONDS = 600;
/** A night that was finished long ago, before mail was set up, is not news. */
const NEWS_SECONDS = 2 * 86_400;
const HALF_A_DAY_MS = 43_200_000;

/** The end of a night's dark; without a site, midnight after its civil date by UTC and half a day, when no place is dark. */
function endOfNight({ civilDate, instrument }: NightAtRest): number {
  const dark = instrument?.site ? darkHours(civilDate, instrument.site) : null;
  return dark?.untilMs ?? Date.parse(`${civilDate}T24:00:00Z`) + HALF_A_DAY_MS;
}

/**
 * Worker use-case, run every minute. Posts the report of each night that is over and at rest to whoever opened it, once:
 * a night and a person have one letter, however many workers look. Returns how many were posted.
 */
export async function postReports(now: Date): Promise<number> {
  if (!mailIsConfigured()) return 0;
  const due = (await nightsAtRest(now, QUIET_SECONDS, NEWS_SECONDS)).filter(
    (night) => endOfNight(night) <= now.getTime(),
  );
  for (const { id: nightId, createdBy: userId } of due) {
    await inTransaction((transaction) => postLetter({ kind: 'night report', nightId, userId }, transaction));
  }
  if (due.length) nudge('outbox');
  return due.length;
}

import type { QueueEntry, QueueView } from './queue-filter';

export interface QueuePlace {
  /** Place from 1; 0 where the spectrum is not in the filtered queue. */
  place: number;
  total: number;
  ids: string[];
  /** The query string that made this queue, kept from page to page. */
  filter: string;
  /** Ids the asker has judged or passed on. */
  done: string[];
  /** Ids with an open question, as far as the asker may know. */
  open: string[];
}

/**
 * Whether an entry keeps its place while one works through a view: what one has done stays, so that the way back is not
 * lost.
 */
function stays(entry: QueueEntry, show: QueueView): boolean {
  if (show === 'mine') return entry.passedToMe;
  if (show === 'second') return entry.second || entry.judged;
  if (show === 'open') return entry.open;
  return true;
}

/** Where a spectrum stands in a view of the whole queue. */
export function placeInQueue(
  everything: QueueEntry[],
  spectrumId: string,
  show: QueueView,
  filter: string,
): QueuePlace {
  const queue = everything.filter((entry) => stays(entry, show));
  const ids = queue.map(({ id }) => id);
  // An open question waits for its ruling, whether or not the asker gave one of the verdicts.
  const left = (entry: QueueEntry) => (show === 'open' ? entry.mayRule : !entry.judged && !entry.passedOn);
  const done = queue.filter((entry) => !left(entry)).map(({ id }) => id);
  const open = queue.filter((entry) => entry.open).map(({ id }) => id);
  return { place: ids.indexOf(spectrumId) + 1, total: ids.length, ids, filter, done, open };
}

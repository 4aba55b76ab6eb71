import type { QueueEntry } from './list-queue';

export interface QueuePlace {
  /** Place from 1; 0 where the spectrum is not in the filtered queue. */
  place: number;
  total: number;
  ids: string[];
  /** The query string that made this queue, kept from page to page. */
  filter: string;
  /** Ids the asker has judged. */
  done: string[];
  open: string[];
}

/** Where a spectrum stands in a queue. */
export function placeInQueue(queue: QueueEntry[], spectrumId: string, filter: string): QueuePlace {
  const ids = queue.map(({ id }) => id);
  const done = queue.filter(({ judged }) => judged).map(({ id }) => id);
  return { place: ids.indexOf(spectrumId) + 1, total: ids.length, ids, filter, done, open: [] };
}

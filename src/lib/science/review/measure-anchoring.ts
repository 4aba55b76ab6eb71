import { blindLooks, type LookGiven } from './blind-looks';
import { shareWithinThousand } from './verdicts-agree';
import { shareDifference, wilsonInterval, type Share, type ShareDifference } from './wilson-interval';

/** A row of what people said, with the engine's answer of then. */
export interface AnchoredLook extends LookGiven {
  /** The engine's answer was hidden until then; null where that was not kept, which was when it was always shown. */
  engineHidden: boolean | null;
  /** What the engine said; null for no redshift. */
  engineRedshift: number | null;
}

/** Looks of one kind and how many of them agree with the engine. */
export interface EngineAgreement {
  looks: number;
  agree: number;
  /** Wilson's 95 % interval of the share; null without looks. */
  share: Share | null;
}

export interface Anchoring {
  shown: EngineAgreement;
  hidden: EngineAgreement;
  /** Shown less hidden, Newcombe's 95 % interval: above 0, people follow what they are shown. */
  difference: ShareDifference | null;
}

/**
 * How often people agree with the engine (within 1,000 km/s, or neither has a redshift) where its answer was shown against where it was
 * hidden at random. Of a hidden look the first word counts, since the answer showed after it; one that was taken back at once is left out.
 *
 * @param rows all rows in the order of time
 * @param ruled `spectrumId userId` of those who ruled: left out, as in `blindLooks`
 */
export function measureAnchoring(rows: readonly AnchoredLook[], ruled: ReadonlySet<string> = new Set()): Anchoring {
  const byPair = new Map<string, AnchoredLook[]>();
  for (const row of rows) {
    const key = `${row.spectrumId} ${row.userId}`;
    byPair.set(key, [...(byPair.get(key) ?? []), row]);
  }
  const arms: { shown: AnchoredLook[]; hidden: AnchoredLook[] } = { shown: [], hidden: [] };
  for (const look of blindLooks(rows, ruled)) {
    const [first, second] = byPair.get(`${look.spectrumId} ${look.userId}`)!;
    if (!first.engineHidden) arms.shown.push(look);
    else if (!second?.withdrawn) arms.hidden.push(first);
  }
  const [shown, hidden] = [count(arms.shown), count(arms.hidden)];
  return { shown, hidden, difference: shareDifference(shown.share, hidden.share) };
}

function count(looks: readonly AnchoredLook[]): EngineAgreement {
  const agree = looks.filter(
    ({ engineRedshift: redshift, ...said }) => shareWithinThousand([[said, { redshift, redshiftError: null }]]) === 1,
  ).length;
  return { looks: looks.length, agree, share: wilsonInterval(agree, looks.length) };
}

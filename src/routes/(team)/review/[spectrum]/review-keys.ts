import type { KeyHandlers } from '$lib/keys/bind-keys';
import { plotChoices } from './plot-choices.svelte';
import type { ReviewState } from './review-state.svelte';

interface Desk {
  review: ReviewState;
  bar: {
    give: (kind: 'candidate' | 'by hand' | 'no redshift') => void;
    focusComment: () => void | Promise<void>;
    focusFlags: () => void | Promise<void>;
  };
  help: { open: () => void };
  lines: { open: () => void };
  names: { open: () => void };
  masks: { open: () => void };
  plot: { open: () => void };
  passing: { open: () => void } | null;
  /** Goes to the question on this spectrum, where there is one. */
  question: () => void;
  leaf: (by: 1 | -1) => void;
  canJudge: boolean;
}

/** What each command of the review page does; the desk is asked for anew at every press, since spectra change under it. */
export function reviewKeys(desk: () => Desk): KeyHandlers {
  const state = (act: (review: ReviewState) => void) => () => act(desk().review);
  const judged = (act: (desk: Desk) => void) => () => desk().canJudge && act(desk());
  return {
    help: () => desk().help.open(),
    left: state((review) => review.nudge(-30)),
    right: state((review) => review.nudge(30)),
    farLeft: state((review) => review.nudge(-300)),
    farRight: state((review) => review.nudge(300)),
    candidateUp: state((review) => review.step(-1)),
    candidateDown: state((review) => review.step(1)),
    snap: state((review) => review.snap()),
    namePeak: () => desk().names.open(),
    zoomIn: state((review) => review.zoom(0.5)),
    zoomOut: state((review) => review.zoom(2)),
    whole: state((review) => review.showAll()),
    smooth: state((review) => (review.smooth = !review.smooth)),
    fluxTaller: state((review) => review.zoomFlux(1 / 1.5)),
    fluxFlatter: state((review) => review.zoomFlux(1.5)),
    residuals: () => plotChoices.change({ residuals: !plotChoices.residuals }),
    beside: state(({ beside }) => void beside.toggle()),
    plot: () => desk().plot.open(),
    brush: state(({ masks }) => (masks.brush = !masks.brush)),
    masks: () => desk().masks.open(),
    undoMask: state(({ masks }) => masks.undo()),
    lines: () => desk().lines.open(),
    secure: judged(({ review }) => (review.confidence = 'secure')),
    probable: judged(({ review }) => (review.confidence = 'probable')),
    ambiguous: judged(({ review }) => (review.confidence = 'ambiguous')),
    none: judged(({ review }) => (review.confidence = 'none')),
    accept: judged(({ bar }) => bar.give('candidate')),
    setByHand: judged(({ bar }) => bar.give('by hand')),
    noRedshift: judged(({ bar }) => bar.give('no redshift')),
    second: judged(({ review }) => review.keepSecond()),
    undo: judged(() => document.querySelector<HTMLFormElement>('#undo-verdict')?.requestSubmit()),
    flags: judged(({ bar }) => void bar.focusFlags()),
    comment: judged(({ bar }) => void bar.focusComment()),
    passOn: () => desk().passing?.open(),
    question: () => desk().question(),
    previous: () => desk().leaf(-1),
    next: () => desk().leaf(1),
  };
}

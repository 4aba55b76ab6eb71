import type { Group, Outcome } from './outcome';
import { expectedCalibrationError, type Forecast } from './reliability';
import { mean, robustScatter, standardDeviation, upperRate95 } from './statistics';

/** One line of the bench's table. */
export interface ScoreRow {
  what: string;
  measured: number;
  count: number;
  floor: string;
  goal: string;
  /** `yes`, `floor` (only the floor), `no`, or what keeps it open. */
  reached: string;
  format: 'percent' | 'number';
  note: string;
}

/** Groups without any emission-line redshift to be found. */
export const NULL_GROUPS: readonly Group[] = [
  'pure noise',
  'empty sky',
  'featureless continuum',
  'star',
  'sign-inverted',
];
const NARROW_GROUPS: readonly Group[] = ['star-forming', 'precision', 'active nucleus', 'shock-like'];

const isClaim = (outcome: Outcome) => ['secure', 'probable'].includes(outcome.answer.confidence);
const among = (outcomes: readonly Outcome[], groups: readonly Group[]) =>
  outcomes.filter((outcome) => groups.includes(outcome.group));

/** Share that must be high: reached by the share itself. */
function highShare(what: string, hits: number, count: number, floor: number | null, goal: number, note = ''): ScoreRow {
  const measured = count ? hits / count : NaN;
  const reached = !count
    ? 'no spectra'
    : measured >= goal
      ? 'yes'
      : floor !== null && measured >= floor
        ? 'floor'
        : 'no';
  const percent = (value: number | null) => (value === null ? '-' : `${+(value * 100).toFixed(2)} %`);
  return { what, measured, count, floor: percent(floor), goal: percent(goal), reached, format: 'percent', note };
}

/** Share that must be low: reached only when the 95 % upper limit stays below. */
function lowShare(what: string, hits: number, count: number, floor: number, goal: number): ScoreRow {
  const upper = upperRate95(hits, count);
  const measured = count ? hits / count : NaN;
  let reached = 'no';
  if (!count) reached = 'no spectra';
  else if (upper <= goal * 1.0005) reached = 'yes';
  else if (upper <= floor) reached = measured <= goal ? 'floor; too few to prove the goal' : 'floor';
  else if (measured <= goal) reached = 'too few to prove';
  const note = count ? `${hits} wrong, below ${(upper * 100).toFixed(2)} % at 95 %` : '';
  return {
    what,
    measured,
    count,
    floor: `${floor * 100} %`,
    goal: `${goal * 100} %`,
    reached,
    format: 'percent',
    note,
  };
}

/** A spread that must be close to 1 from both sides. */
function nearOne(what: string, pulls: readonly number[], needed: number): ScoreRow {
  const measured = standardDeviation(pulls);
  let reached = 'no';
  if (pulls.length < needed) reached = `needs ${needed}`;
  else if (measured >= 0.95 && measured <= 1.05) reached = 'yes';
  else if (measured >= 0.8 && measured <= 1.2) reached = 'floor';
  const note = pulls.length > 1 ? `robust ${robustScatter(pulls).toFixed(3)}, mean ${mean(pulls).toFixed(3)}` : '';
  return { what, measured, count: pulls.length, floor: '0.8-1.2', goal: '0.95-1.05', reached, format: 'number', note };
}

const numbers = (values: (number | null)[]) => values.filter((value): value is number => value !== null);

/** No fault but a gap between arms was put in. */
export function isClean({ known }: Outcome): boolean {
  return known.artefacts.every((artefact) => artefact === 'gap');
}

function pullRows(which: string, outcomes: readonly Outcome[]): ScoreRow[] {
  const lines = outcomes.flatMap(({ judged }) => judged.linePulls);
  return [
    nearOne(`pull of z, ${which}`, numbers(outcomes.map(({ judged }) => judged.redshiftPull)), 800),
    nearOne(`pull of flux, ${which}`, numbers(lines.map((line) => line.flux)), 800),
    nearOne(`pull of equivalent width, ${which}`, numbers(lines.map((line) => line.equivalentWidth)), 800),
  ];
}

/** Probability of each spectrum's best candidate and whether it came true. */
export function forecastsOf(outcomes: readonly Outcome[]): Forecast[] {
  return outcomes
    .filter(({ answer }) => answer.candidates.length > 0)
    .map(({ answer, judged }) => ({ probability: answer.candidates[0][1], cameTrue: judged.bestWithinThousand }));
}

/** Spectra of the first row: a line of S/N >= 7 and two features of >= 4, in emission. */
export function isFindable({ known }: Outcome): boolean {
  return known.hasEmission && known.bestSignalToNoise >= 7 && known.featuresOverFour >= 2;
}

/** Spectra with one feature, of S/N >= 8. */
export function isSingle({ group, known }: Outcome): boolean {
  return group === 'single line' && known.bestSignalToNoise >= 8 && known.featuresOverFour === 1;
}

/**
 * The table of the bench: measured figure, count, floor, goal, reached or not, in the order of the bar that the product sets itself.
 *
 * A low rate counts as reached only where its 95 % upper limit lies below the goal: 0 wrong in 2,996 for 0.1 %.
 */
export function score(outcomes: readonly Outcome[]): ScoreRow[] {
  const findable = outcomes.filter(isFindable);
  const secure = outcomes.filter(({ answer }) => answer.confidence === 'secure');
  const nulls = among(outcomes, NULL_GROUPS);
  const passive = among(outcomes, ['passive']);
  const single = outcomes.filter(isSingle);
  const narrow = among(outcomes, NARROW_GROUPS);
  const precise = among(outcomes, ['precision']);
  const bound = numbers(precise.map(({ judged }) => judged.overBound));
  const forecasts = forecastsOf(outcomes);
  const calibration = expectedCalibrationError(forecasts);
  const overBound = standardDeviation(bound);
  return [
    highShare(
      'right redshift, a line of S/N >= 7 and two of >= 4',
      findable.filter(({ judged }) => judged.right).length,
      findable.length,
      0.95,
      0.995,
    ),
    lowShare(
      'wrong by > 1,000 km/s among secure',
      secure.filter((o) => o.judged.farOff).length,
      secure.length,
      0.01,
      0.001,
    ),
    lowShare('secure or probable on nulls', nulls.filter(isClaim).length, nulls.length, 0.01, 0.001),
    lowShare(
      'passive galaxies: wrong and secure or probable',
      passive.filter((o) => isClaim(o) && o.judged.farOff).length,
      passive.length,
      0.01,
      0.001,
    ),
    highShare(
      'single line, S/N >= 8: right in the first three',
      single.filter(({ judged }) => judged.rightInThree).length,
      single.length,
      null,
      0.98,
    ),
    {
      what: 'scatter over Cramér-Rao bound, S/N 20-100',
      measured: overBound,
      count: bound.length,
      floor: '1.5',
      goal: '1.1',
      reached: bound.length < 200 ? 'needs 200' : overBound <= 1.1 ? 'yes' : overBound <= 1.5 ? 'floor' : 'no',
      format: 'number',
      note: bound.length > 1 ? `robust ${robustScatter(bound).toFixed(3)}` : '',
    },
    ...pullRows('narrow lines, clean', narrow.filter(isClean)),
    ...pullRows(
      'narrow lines, faults of a night',
      narrow.filter((o) => !isClean(o)),
    ),
    {
      what: 'expected calibration error',
      measured: calibration,
      count: forecasts.length,
      floor: '-',
      goal: '0.02',
      reached: forecasts.length < 3000 ? 'needs 3000' : calibration <= 0.02 ? 'yes' : 'no',
      format: 'number',
      note: '',
    },
  ];
}

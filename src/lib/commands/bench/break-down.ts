import type { Outcome } from './outcome';
import { layOutTable, percent, short } from './print-table';
import { expectedCalibrationError, reliabilityBins } from './reliability';
import { forecastsOf, isClean, isFindable, isSingle } from './score';
import { median, robustScatter, standardDeviation } from './statistics';

const SIGNAL_BINS = [0, 3, 5, 7, 10, 15, 25, 50, Infinity] as const;

const numbers = (values: (number | null)[]) => values.filter((value): value is number => value !== null);
const counted = (outcomes: readonly Outcome[], is: (o: Outcome) => boolean) => outcomes.filter(is).length;

function summary(name: string, outcomes: readonly Outcome[]): string[] {
  const word = (confidence: string) => counted(outcomes, (o) => o.answer.confidence === confidence);
  const pulls = numbers(outcomes.map((o) => o.judged.redshiftPull));
  const forecasts = forecastsOf(outcomes);
  return [
    name,
    `${outcomes.length}`,
    percent(
      counted(outcomes, (o) => o.judged.right),
      outcomes.length,
    ),
    percent(
      counted(outcomes, (o) => o.judged.rightAnywhere),
      outcomes.length,
    ),
    `${word('secure')}`,
    `${counted(outcomes, (o) => o.answer.confidence === 'secure' && o.judged.farOff)}`,
    `${word('probable')}`,
    `${counted(outcomes, (o) => o.answer.confidence === 'probable' && o.judged.farOff)}`,
    `${word('ambiguous')}`,
    `${word('none')}`,
    short(standardDeviation(pulls), 2),
    short(robustScatter(pulls), 2),
    short(expectedCalibrationError(forecasts)),
  ];
}

const HEADER = [
  '',
  'spectra',
  'right',
  'listed',
  'secure',
  'wrong',
  'probable',
  'wrong',
  'ambiguous',
  'none',
  'pull z',
  'robust',
  'ECE',
];

/** What came out for each class of spectrum. */
export function tableByClass(outcomes: readonly Outcome[]): string {
  const groups = [...new Set(outcomes.map((o) => o.group))];
  return layOutTable(
    HEADER,
    groups.map((group) =>
      summary(
        group,
        outcomes.filter((o) => o.group === group),
      ),
    ),
  );
}

/** What came out by the signal-to-noise ratio of the best feature, emission-line spectra only. */
export function tableBySignal(outcomes: readonly Outcome[]): string {
  const emission = outcomes.filter((o) => o.known.hasEmission);
  const rows: string[][] = [];
  for (let b = 0; b + 1 < SIGNAL_BINS.length; b++) {
    const [from, to] = [SIGNAL_BINS[b], SIGNAL_BINS[b + 1]];
    const inside = emission.filter((o) => o.known.bestSignalToNoise >= from && o.known.bestSignalToNoise < to);
    if (inside.length) rows.push(summary(`S/N ${from} to ${to}`, inside));
  }
  const findable = emission.filter(isFindable);
  rows.push(summary('findable', findable));
  return layOutTable(HEADER, rows);
}

/** True identity of a lone line against the one that the answer gives it. */
export function tableOfIdentities(outcomes: readonly Outcome[]): string {
  const single = outcomes.filter(isSingle);
  const truths = [...new Set(single.map((o) => o.known.strongestLine ?? '?'))].sort();
  const named = (o: Outcome) => o.judged.namedLine ?? 'no answer';
  const answers = [...new Set(single.map(named))].sort();
  const rows = truths.map((truth) => {
    const inside = single.filter((o) => o.known.strongestLine === truth);
    const row = answers.map((answer) => `${counted(inside, (o) => named(o) === answer)}`);
    return [
      truth,
      `${inside.length}`,
      ...row,
      percent(
        counted(inside, (o) => o.judged.rightInThree),
        inside.length,
      ),
    ];
  });
  return layOutTable(['true \\ answered', 'spectra', ...answers, 'in first three'], rows);
}

/** Reliability in numbers. */
export function tableOfReliability(outcomes: readonly Outcome[]): string {
  const rows = reliabilityBins(forecastsOf(outcomes)).map((bin) => [
    `${bin.from} to ${bin.to}`,
    `${bin.count}`,
    short(bin.stated, 4),
    short(bin.observed, 4),
  ]);
  return layOutTable(['stated probability', 'answers', 'mean stated', 'came true'], rows);
}

const LINES_OF_INTEREST = 8;

/** Spread of (measured - true) / error for clean and ordinary nights, and for the lines seen most. */
export function tableOfPulls(outcomes: readonly Outcome[]): string {
  const row = (name: string, of: readonly Outcome[], line: string | null) => {
    const pulls = of.flatMap((o) => o.judged.linePulls).filter((p) => line === null || p.line === line);
    const z = line === null ? numbers(of.map((o) => o.judged.redshiftPull)) : [];
    const flux = numbers(pulls.map((p) => p.flux));
    const width = numbers(pulls.map((p) => p.equivalentWidth));
    const spread = (values: number[]) => [short(standardDeviation(values), 2), short(robustScatter(values), 2)];
    return [
      name,
      `${of.length}`,
      ...spread(z),
      `${flux.length}`,
      short(median(flux), 2),
      ...spread(flux),
      ...spread(width),
    ];
  };
  const narrow = outcomes.filter((o) => o.known.hasEmission && !o.known.broad);
  const clean = narrow.filter(isClean);
  const faults = [...new Set(narrow.flatMap((o) => o.known.artefacts))].filter((a) => a !== 'gap').sort();
  const counts = new Map<string, number>();
  for (const { line } of narrow.flatMap((o) => o.judged.linePulls)) counts.set(line, (counts.get(line) ?? 0) + 1);
  const lines = [...counts].sort((a, b) => b[1] - a[1]).slice(0, LINES_OF_INTEREST);
  return layOutTable(
    ['', 'spectra', 'z', 'robust', 'lines', 'median', 'flux', 'robust', 'width', 'robust'],
    [
      row('without faults', clean, null),
      ...[...new Set(narrow.map((o) => o.group))].map((group) =>
        row(
          group,
          narrow.filter((o) => o.group === group),
          null,
        ),
      ),
      ...faults.map((fault) =>
        row(
          `with ${fault}`,
          narrow.filter((o) => o.known.artefacts.includes(fault)),
          null,
        ),
      ),
      ...lines.map(([line]) => row(`${line}, without faults`, clean, line)),
    ],
  );
}

/** Scatter over the Cramér-Rao bound by signal-to-noise ratio. */
export function tableOfBounds(outcomes: readonly Outcome[]): string {
  const rows: string[][] = [];
  for (const [from, to] of [
    [20, 35],
    [35, 60],
    [60, 110],
  ]) {
    const ratios = numbers(
      outcomes
        .filter((o) => o.known.bestSignalToNoise >= from && o.known.bestSignalToNoise < to)
        .map((o) => o.judged.overBound),
    );
    rows.push([
      `S/N ${from} to ${to}`,
      `${ratios.length}`,
      short(standardDeviation(ratios)),
      short(robustScatter(ratios)),
      short(median(ratios)),
    ]);
  }
  return layOutTable(['', 'spectra', 'scatter / bound', 'robust', 'median'], rows);
}

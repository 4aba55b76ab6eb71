import type { NightMeasurement } from '$lib/domain/night';

/** Signal-to-noise a pixel against what should bring it: magnitude where a list gives it, else exposure time. */
export const AGAINST = ['magnitude', 'exposure'] as const;
export type Against = (typeof AGAINST)[number];

const valueOf = (row: NightMeasurement, against: Against) =>
  against === 'magnitude' ? row.magnitude : row.exposureSeconds;

/** Points of the plot; rows that lack one of both are left out. */
export function signalPoints(rows: readonly NightMeasurement[], against: Against) {
  return rows.flatMap((row) => {
    const x = valueOf(row, against);
    const y = row.medianSignalToNoise;
    return x === null || y === null ? [] : [{ x, y, confidence: row.confidence }];
  });
}

/** Magnitude where a third of the rows or more have one, else exposure time. */
export function firstAgainst(rows: readonly NightMeasurement[]): Against {
  const listed = rows.filter(({ magnitude }) => magnitude !== null).length;
  return listed > 0 && listed >= rows.length / 3 ? 'magnitude' : 'exposure';
}

/** Noise factor against signal-to-noise: whether the errors of a reduction are honest, and for which spectra not. */
export function noisePoints(rows: readonly NightMeasurement[]) {
  return rows.flatMap(({ medianSignalToNoise, noiseFactor, confidence }) =>
    medianSignalToNoise === null || noiseFactor === null
      ? []
      : [{ x: medianSignalToNoise, y: noiseFactor, confidence }],
  );
}

/** Median of the noise factors; null where there are none. */
export function medianNoiseFactor(rows: readonly NightMeasurement[]): number | null {
  const factors = rows.flatMap(({ noiseFactor }) => (noiseFactor === null ? [] : [noiseFactor])).sort((a, b) => a - b);
  return factors.length ? factors[factors.length >> 1] : null;
}

import { firstAt, type CoarseSpectrum } from './coarse-spectrum';

/** A band of titanium oxide: absorption that begins at a head and fades to the red. */
export interface Band {
  /** Vacuum ångström. */
  head: number;
  /** Length over which it fades by e, ångström. */
  reach: number;
  /** ln of the typical depth at the head, as a share of the continuum, and its scatter. */
  logStrength: number;
  scatter: number;
}

const band = (head: number, depth: number, reach: number): Band => ({
  head,
  reach,
  logStrength: Math.log(depth),
  scatter: 0.5,
});

/** All bands of one star are deeper or shallower together, scatter in ln: from early to late M. */
export const BAND_SIGMA = 0.6;

/*
 * Heads of the alpha, gamma' and gamma systems (Gray & Corbally 2009, chapter 8; Valenti, Piskunov & Johns-Krull 1998;
 * from memory); depths and reaches of a mid M dwarf, common practice, no single source.
 */
export const TITANIUM_OXIDE_BANDS: readonly Band[] = [
  band(4762, 0.2, 60),
  band(4955, 0.3, 80),
  band(5168, 0.3, 80),
  band(5449, 0.3, 90),
  band(5849, 0.25, 90),
  band(6160, 0.35, 110),
  band(6652, 0.3, 110),
  band(7055, 0.4, 130),
  band(7591, 0.35, 120),
  band(8434, 0.3, 90),
  band(8861, 0.2, 90),
];

/** Writes a band's shape, for unit depth, into `values` at `offset`; returns the bins that it reaches. */
export function fillBand(
  { count: n, logWavelength, level }: CoarseSpectrum,
  { head, reach }: Band,
  values: Float64Array,
  offset: number,
): { from: number; to: number } {
  const from = firstAt(logWavelength, Math.log(head));
  const to = firstAt(logWavelength, Math.log(head + 5 * reach));
  if (from >= n || logWavelength[0] > Math.log(head)) return { from: 0, to: 0 };
  for (let i = from; i < to; i++) {
    values[offset + i - from] = -level[i] * Math.exp((head - Math.exp(logWavelength[i])) / reach);
  }
  return { from, to };
}

import type { Measured } from './dust-from-balmer';

/** Class by the diagram of Baldwin, Phillips & Terlevich (1981, PASP 93, 5). */
export type IonisationClass = 'star-forming' | 'composite' | 'active nucleus';

/** Highest log [O III]/H-beta that starbursts reach: 0.61 / (x - 0.47) + 1.19 (Kewley et al. 2001, ApJ 556, 121, eq. 5); -Infinity from x = 0.47 on. */
export function starburstLimit(logNitrogen: number): number {
  return logNitrogen < 0.47 ? 0.61 / (logNitrogen - 0.47) + 1.19 : -Infinity;
}

/** Where the star-forming sequence ends: 0.61 / (x - 0.05) + 1.3 (Kauffmann et al. 2003, MNRAS 346, 1055, eq. 1); -Infinity from x = 0.05 on. */
export function starFormingLimit(logNitrogen: number): number {
  return logNitrogen < 0.05 ? 0.61 / (logNitrogen - 0.05) + 1.3 : -Infinity;
}

/** A point of the diagram: x = log10([N II] 6585 / H-alpha), y = log10([O III] 5008 / H-beta). */
export function classifyPoint(x: number, y: number): IonisationClass {
  if (y <= starFormingLimit(x)) return 'star-forming';
  return y <= starburstLimit(x) ? 'composite' : 'active nucleus';
}

/** Fluxes that the diagram needs; null where the line is not covered. */
export interface DiagramFluxes {
  halpha: Measured | null;
  hbeta: Measured | null;
  nitrogen: Measured | null;
  oxygen: Measured | null;
}

const LEAST_SIGNAL = 3;

/**
 * Class of the ionised gas from four line fluxes.
 *
 * H-alpha and H-beta must be seen at 3 sigma. Where [N II] or [O III] is not, its 3 sigma limit can only lie to the right of or above the
 * truth: the class holds then only if even the limit falls among the star-forming galaxies, else null.
 *
 * @returns null where a line is not covered or too faint to tell
 */
export function ionisationClass({ halpha, hbeta, nitrogen, oxygen }: DiagramFluxes): IonisationClass | null {
  const seen = (line: Measured | null): line is Measured => line !== null && line.value >= LEAST_SIGNAL * line.error;
  if (!seen(halpha) || !seen(hbeta) || !nitrogen || !oxygen) return null;
  const upper = (line: Measured) => (line.value >= LEAST_SIGNAL * line.error ? line.value : LEAST_SIGNAL * line.error);
  const x = Math.log10(upper(nitrogen) / halpha.value);
  const y = Math.log10(upper(oxygen) / hbeta.value);
  const found = classifyPoint(x, y);
  return (seen(nitrogen) && seen(oxygen)) || found === 'star-forming' ? found : null;
}

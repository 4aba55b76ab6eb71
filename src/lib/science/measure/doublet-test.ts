import { lineByName } from '../constants/lines';
import { componentOf, type LineComponent } from './fit/components';
import type { FitData } from './fit/fit-windows';
import { jointFit } from './fit/joint-fit';

const FIRST = lineByName('[O II] 3727');
const DOUBLET: readonly LineComponent[] = [componentOf('[O II] 3727'), componentOf('[O II] 3730')];
const SINGLE: readonly LineComponent[] = [
  { name: '[O II] as one line', width: 0, members: [{ entry: FIRST, rest: 3728.6, share: 1 }] },
];

/**
 * By how much (delta chi-square) the [O II] doublet fits better than one line of free position and width.
 *
 * @param logScale ln(1+z) of the candidate
 * @param errorScale what errors are multiplied by
 * @returns 0 where the doublet is not covered
 */
export function doubletAdvantage(data: FitData, logScale: number, sigmaKms: number, errorScale: number): number {
  const doublet = jointFit(data, DOUBLET, { logScale, sigmaKms: [sigmaKms, 1900] }, 8);
  const single = jointFit(data, SINGLE, { logScale, sigmaKms: [Math.max(sigmaKms, 120), 1900] }, 12);
  if (!doublet || !single) return 0;
  return (doublet.gain - single.gain) / errorScale ** 2;
}

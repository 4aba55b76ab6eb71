/**
 * 1-sigma error of a parameter from the drop of chi-square around its best value: where the drop falls as a parabola,
 * delta chi-square = (x / sigma)^2 with delta chi-square = 1 at one sigma (Avni 1976, ApJ 210, 642).
 * @param gainAt the drop of chi-square at an offset from the best value
 * @param step offset at which the curvature is taken, in the parameter's unit
 * Null where the drop does not fall on both sides taken together: there is no maximum to speak of.
 */
export function errorFromGain(gainAt: (offset: number) => number, step: number): number | null {
  const fall = 2 * gainAt(0) - gainAt(-step) - gainAt(step);
  return fall > 0 ? step * Math.sqrt(2 / fall) : null;
}

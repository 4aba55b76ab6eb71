/**
 * How many planted spectra of a night are dealt, so that they are the wanted share of all that is: rate / (1 - rate) of the
 * night's own. A rate that is lowered takes the last ones away; a small night may get none.
 */
export function plantedDealt(plantedRate: number, spectraOfNight: number): number {
  if (plantedRate <= 0 || plantedRate >= 1) return 0;
  return Math.round((plantedRate / (1 - plantedRate)) * spectraOfNight);
}

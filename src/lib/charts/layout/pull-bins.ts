/** Pulls counted in equal bins from -limit to limit; what lies beyond is counted at each end. */
export interface PullBins {
  width: number;
  bins: { from: number; to: number; count: number }[];
  below: number;
  above: number;
}

/** Half a sigma a bin, a quarter where there are enough pulls to fill them. */
export function pullBins(pulls: readonly number[], limit = 5): PullBins {
  const width = pulls.length >= 400 ? 0.25 : 0.5;
  const count = Math.round((2 * limit) / width);
  const bins = Array.from({ length: count }, (_, i) => ({
    from: -limit + i * width,
    to: -limit + (i + 1) * width,
    count: 0,
  }));
  let [below, above] = [0, 0];
  for (const pull of pulls) {
    if (pull < -limit) below++;
    else if (pull >= limit) above++;
    else bins[Math.min(count - 1, Math.floor((pull + limit) / width))].count++;
  }
  return { width, bins, below, above };
}

/** Counts a bin around `pull` would have if errors were honest: a unit Gaussian of so many pulls. */
export function honestCount(pull: number, pulls: number, width: number): number {
  return (pulls * width * Math.exp(-0.5 * pull * pull)) / Math.sqrt(2 * Math.PI);
}

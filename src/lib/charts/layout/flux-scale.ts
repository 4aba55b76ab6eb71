/** Lowest and highest flux of a plot. */
export interface FluxScale {
  bottom: number;
  top: number;
}

/**
 * The flux axis of a spectrum: from the data alone, outside sky lines, never from the model, so that it stands still
 * while the redshift moves. The highest clear value gets 14 % of room above it; zero is always in sight.
 * @param values flux as drawn (column means, or single pixels); NaN is passed over
 * @param clear whether a value lies outside strong sky lines and so may set the top
 * Without a finite value the scale is 0 to 1.
 */
export function fluxScale(values: Float64Array, clear: (index: number) => boolean): FluxScale {
  const sorted = values.filter(Number.isFinite).sort();
  if (sorted.length === 0) return { bottom: 0, top: 1 };
  const quantile = (share: number) => sorted[Math.min(sorted.length - 1, Math.floor(share * sorted.length))];
  let peak = quantile(0.98);
  values.forEach((value, i) => {
    if (value > peak && clear(i)) peak = value;
  });
  const least = Math.min(0, quantile(0.004));
  // A spectrum that is negative throughout still gets a top above zero.
  const span = Math.max(peak, 0) - least || Math.abs(peak) || 1;
  return { bottom: least - 0.05 * span, top: Math.max(peak, 0) + 0.14 * span };
}

/** An SVG path through columns of one step each; NaN breaks it, so that a gap stays a gap. */
export function curvePath(
  values: Float64Array,
  toX: (column: number) => number,
  toY: (value: number) => number,
): string {
  let path = '';
  let open = false;
  for (let column = 0; column < values.length; column++) {
    const y = toY(values[column]);
    if (y !== y) {
      open = false;
      continue;
    }
    path += `${open ? 'L' : 'M'}${toX(column + 0.5).toFixed(1)} ${y.toFixed(1)}`;
    open = true;
  }
  return path;
}

/** The range that holds all but the most extreme shares of some values, widened by a tenth; 0 to 1 where there are none. */
export function robustRange(values: readonly number[], share = 0.004): [number, number] {
  const sorted = Float64Array.from(values.filter(Number.isFinite)).sort();
  if (sorted.length === 0) return [0, 1];
  const at = (fraction: number) => sorted[Math.min(sorted.length - 1, Math.floor(fraction * sorted.length))];
  const [low, high] = [at(share), at(1 - share)];
  const pad = (high - low || Math.abs(high) || 1) * 0.1;
  return [low - pad, high + pad];
}

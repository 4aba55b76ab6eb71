import { curveMonotoneX, line } from 'd3';

/** Strokes columns of one pixel as steps; NaN breaks the line, so that a gap stays a gap. */
export function strokeColumns(
  context: CanvasRenderingContext2D,
  left: number,
  values: Float64Array,
  toY: (value: number) => number,
  steps: boolean,
): void {
  context.beginPath();
  let open = false;
  for (let column = 0; column < values.length; column++) {
    const value = values[column];
    if (value !== value) {
      open = false;
      continue;
    }
    const [x, y] = [left + column, toY(value)];
    if (!open) context.moveTo(x, y);
    else if (!steps) context.lineTo(x, y);
    if (steps) {
      if (open) context.lineTo(x, y);
      context.lineTo(x + 1, y);
    }
    open = true;
  }
  context.stroke();
}

/** Strokes single pixels as steps over their own width; unusable ones and detector gaps break the line. */
export function strokePixels(
  context: CanvasRenderingContext2D,
  range: readonly [number, number],
  edges: { left: Float64Array; right: Float64Array },
  value: (index: number) => number,
  toX: (wavelength: number) => number,
  toY: (value: number) => number,
): void {
  context.beginPath();
  let end = NaN;
  for (let i = range[0]; i < range[1]; i++) {
    const y = toY(value(i));
    if (y !== y) {
      end = NaN;
      continue;
    }
    const [left, right] = [toX(edges.left[i]), toX(edges.right[i])];
    // Half a CSS pixel of play: edges of neighbours are computed twice.
    if (Math.abs(left - end) < 0.5) context.lineTo(left, y);
    else context.moveTo(left, y);
    context.lineTo(right, y);
    end = right;
  }
  context.stroke();
}

/** Strokes a smooth curve through pixel centres without overshooting between them (monotone cubic, Steffen 1990). */
export function strokeCurve(
  context: CanvasRenderingContext2D,
  range: readonly [number, number],
  x: (index: number) => number,
  y: (index: number) => number,
): void {
  const indices = Array.from({ length: Math.max(0, range[1] - range[0]) }, (_, k) => range[0] + k);
  context.beginPath();
  line<number>()
    .defined((i) => Number.isFinite(y(i)))
    .x(x)
    .y(y)
    .curve(curveMonotoneX)
    .context(context)(indices);
  context.stroke();
}

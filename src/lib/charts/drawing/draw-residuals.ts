import { RESIDUAL_SIGMAS } from '../layout/spectrum-frame';
import { drawSkyLines } from './draw-bands';
import type { SpectrumScene } from './draw-spectrum';

/**
 * Flux less model in units of each pixel's error, from -5 to 5: in every column a bar from the least to the greatest.
 * Lines at nothing and at three errors to either side; a mark at the edge where something lies beyond it.
 */
export function drawResiduals(
  context: CanvasRenderingContext2D,
  scene: SpectrumScene,
  raw: { flux: Float64Array; error: Float64Array },
  model: Float64Array,
): void {
  const { frame, style, bands, range, pixels, toX } = scene;
  const [top, bottom] = [frame.residualTop, frame.residualBottom];
  if (bottom <= top) return;
  const toY = (sigmas: number) => (top + bottom) / 2 - (sigmas / RESIDUAL_SIGMAS) * ((bottom - top) / 2);
  const area = { left: frame.left, right: frame.left + frame.plotWidth, top, bottom };
  context.fillStyle = style.colour.well;
  context.fillRect(frame.left, top, frame.plotWidth, bottom - top);
  context.save();
  context.beginPath();
  context.rect(frame.left, top, frame.plotWidth, bottom - top);
  context.clip();
  drawSkyLines(context, style, area, bands, toX);
  context.fillStyle = style.colour.grid;
  for (const sigmas of [-3, 3]) context.fillRect(frame.left, Math.round(toY(sigmas)), frame.plotWidth, 1);
  const count = Math.ceil(frame.plotWidth) + 1;
  const [low, high] = [new Float64Array(count).fill(Infinity), new Float64Array(count).fill(-Infinity)];
  for (let i = range[0]; i < range[1]; i++) {
    if (!(raw.error[i] > 0 && raw.error[i] < Infinity)) continue;
    const sigmas = (raw.flux[i] - model[i]) / raw.error[i];
    const first = Math.max(0, Math.floor(toX(pixels.edges.left[i]) - frame.left));
    const end = Math.min(count - 1, Math.max(first, Math.ceil(toX(pixels.edges.right[i]) - frame.left) - 1));
    for (let column = first; column <= end; column++) {
      if (sigmas < low[column]) low[column] = sigmas;
      if (sigmas > high[column]) high[column] = sigmas;
    }
  }
  context.fillStyle = style.colour.flux;
  for (let column = 0; column < count; column++) {
    if (high[column] < low[column]) continue;
    const [from, to] = [toY(high[column]), toY(low[column])];
    context.fillRect(frame.left + column, from - 0.5, 1, Math.max(1, to - from));
    if (high[column] > RESIDUAL_SIGMAS) context.fillRect(frame.left + column - 1, top, 3, 3);
    if (low[column] < -RESIDUAL_SIGMAS) context.fillRect(frame.left + column - 1, bottom - 3, 3, 3);
  }
  context.fillStyle = style.colour.model;
  context.fillRect(frame.left, Math.round(toY(0)), frame.plotWidth, 1);
  context.restore();
}

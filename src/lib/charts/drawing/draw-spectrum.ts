import type { Columns } from '../layout/bin-columns';
import type { FluxScale } from '../layout/flux-scale';
import type { SpectrumFrame } from '../layout/spectrum-frame';
import type { ObserverBands } from '../observer-bands';
import { drawGaps, drawSkyLines, drawTelluric } from './draw-bands';
import { strokeColumns, strokeCurve, strokePixels } from './draw-steps';
import type { PlotStyle } from './plot-style';

/** Pixels of a spectrum as drawn: smoothed where that is asked for. */
export interface DrawnPixels {
  wavelength: Float64Array;
  flux: Float64Array;
  error: Float64Array;
  sky: Float64Array | null;
  continuum: Float64Array;
  edges: { left: Float64Array; right: Float64Array };
  /** What no pixel covers. */
  gaps: { from: number; to: number }[];
}

export interface SpectrumScene {
  frame: SpectrumFrame;
  style: PlotStyle;
  pixels: DrawnPixels;
  bands: ObserverBands;
  /** Pixels in view, first and one past the last. */
  range: [number, number];
  /** Null where pixels are wider than columns and are drawn one by one. */
  columns: Columns | null;
  scale: FluxScale;
  fluxTicks: readonly number[];
  toX: (wavelength: number) => number;
  toY: (flux: number) => number;
}

const USABLE = (error: number) => error > 0 && error < Infinity;

/**
 * Everything that stands still while the redshift moves: ground, bands, envelope, error, flux, cuts.
 * @param under draws what lies right under the flux
 */
export function drawSpectrum(context: CanvasRenderingContext2D, scene: SpectrumScene, under = () => {}): void {
  const { frame, style, pixels, columns, range, toX, toY } = scene;
  const area = { left: frame.left, right: frame.left + frame.plotWidth, top: frame.fluxTop, bottom: frame.fluxBottom };
  context.fillStyle = style.colour.well;
  context.fillRect(area.left, area.top, frame.plotWidth, area.bottom - area.top);
  context.save();
  context.beginPath();
  context.rect(area.left, area.top, frame.plotWidth, area.bottom - area.top);
  context.clip();
  drawSkyLines(context, style, area, scene.bands, toX);
  drawTelluric(context, style, area, scene.bands, toX, 9, 5);
  drawGaps(context, style, area, pixels.gaps, toX);
  context.fillStyle = style.colour.grid;
  for (const tick of scene.fluxTicks) context.fillRect(area.left, Math.round(toY(tick)), frame.plotWidth, 1);
  if (columns) {
    context.fillStyle = style.colour.envelope;
    for (let column = 0; column < columns.count; column++) {
      const [top, bottom] = [toY(columns.high[column]), toY(columns.low[column])];
      if (top === top) context.fillRect(area.left + column, top, 1, Math.max(1, bottom - top));
    }
  }
  const stroke = (name: 'error' | 'flux', colour: 'error-line' | 'flux') => {
    context.strokeStyle = style.colour[colour];
    context.lineWidth = style.width[name];
    context.setLineDash(style.dash[name]);
    context.lineJoin = 'round';
  };
  const fluxAt = (i: number) => (USABLE(pixels.error[i]) ? pixels.flux[i] : NaN);
  stroke('error', 'error-line');
  if (columns) strokeColumns(context, area.left, columns.error, toY, false);
  else strokePixels(context, range, pixels.edges, (i) => (USABLE(pixels.error[i]) ? pixels.error[i] : NaN), toX, toY);
  under();
  stroke('flux', 'flux');
  if (columns) strokeColumns(context, area.left, columns.mean, toY, true);
  else strokePixels(context, range, pixels.edges, fluxAt, toX, toY);
  context.setLineDash([]);
  markCuts(context, scene, fluxAt);
  context.restore();
  if (pixels.sky) drawSky(context, scene, pixels.sky);
}

/** Continuum or model, on a canvas of its own above the rest, since they alone change while the redshift is dragged. */
export function drawCurve(
  context: CanvasRenderingContext2D,
  scene: SpectrumScene,
  name: 'continuum' | 'model',
  curve: Float64Array,
  columns: Float64Array | null,
): void {
  const { frame, style, pixels, toX, toY } = scene;
  context.save();
  context.beginPath();
  context.rect(frame.left, frame.fluxTop, frame.plotWidth, frame.fluxBottom - frame.fluxTop);
  context.clip();
  context.strokeStyle = style.colour[name];
  context.lineWidth = style.width[name];
  context.setLineDash(style.dash[name]);
  context.lineJoin = 'round';
  const range = [Math.max(0, scene.range[0] - 1), Math.min(curve.length, scene.range[1] + 1)] as const;
  if (columns) strokeColumns(context, frame.left, columns, toY, false);
  else
    strokeCurve(
      context,
      range,
      (i) => toX(pixels.wavelength[i]),
      (i) => toY(curve[i]),
    );
  context.restore();
}

/** A triangle where the flux runs out of the frame, so that no cut goes unmarked. */
function markCuts(context: CanvasRenderingContext2D, scene: SpectrumScene, fluxAt: (index: number) => number): void {
  const { frame, columns, scale, range, pixels, toX } = scene;
  context.fillStyle = scene.style.colour['ink-quiet'];
  const last = { top: -9, bottom: -9 };
  const mark = (x: number, value: number) => {
    const side = value > scale.top ? 'top' : value < scale.bottom ? 'bottom' : null;
    if (!side || x - last[side] <= 5) return;
    last[side] = x;
    const [edge, into] = side === 'top' ? [frame.fluxTop, 5] : [frame.fluxBottom, -5];
    context.beginPath();
    context.moveTo(x - 3, edge + into);
    context.lineTo(x + 3, edge + into);
    context.lineTo(x, edge);
    context.fill();
  };
  if (columns) columns.mean.forEach((value, column) => mark(frame.left + column + 0.5, value));
  else for (let i = range[0]; i < range[1]; i++) mark(toX(pixels.wavelength[i]), fluxAt(i));
}

/** The greatest sky in each column, on a square-root axis that ends at the sky's own greatest. */
function drawSky(context: CanvasRenderingContext2D, scene: SpectrumScene, sky: Float64Array): void {
  const { frame, style, range, pixels, toX } = scene;
  const [top, bottom] = [frame.skyTop, frame.skyBottom];
  context.fillStyle = style.colour.well;
  context.fillRect(frame.left, top, frame.plotWidth, bottom - top);
  context.save();
  context.beginPath();
  context.rect(frame.left, top, frame.plotWidth, bottom - top);
  context.clip();
  context.fillStyle = style.colour.sky;
  const most = Math.sqrt(skyCeiling(sky));
  const tallest = new Float64Array(Math.ceil(frame.plotWidth) + 1);
  for (let i = range[0]; i < range[1]; i++) {
    const first = Math.max(0, Math.floor(toX(pixels.edges.left[i]) - frame.left));
    const end = Math.min(tallest.length - 1, Math.floor(toX(pixels.edges.right[i]) - frame.left));
    for (let column = first; column <= end; column++) if (sky[i] > tallest[column]) tallest[column] = sky[i];
  }
  tallest.forEach((value, column) => {
    const height = (Math.sqrt(value) / most) * (bottom - top);
    context.fillRect(frame.left + column, bottom - height, 1, height);
  });
  context.restore();
}

/** The sky panel's upper end: its own greatest value and a little room; 1 where the sky is nowhere positive. */
export function skyCeiling(sky: Float64Array): number {
  let most = 0;
  for (const value of sky) if (value > most && value < Infinity) most = value;
  return most > 0 ? most * 1.1 : 1;
}

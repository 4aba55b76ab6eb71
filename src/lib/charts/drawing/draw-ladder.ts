import { SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';
import type { ExpectedLine } from '../expected-line';
import { pixelRange } from '../layout/pixel-edges';
import { rungScale } from '../layout/rung-scale';
import type { Band, ObserverBands } from '../observer-bands';
import { drawGaps, drawSkyLines, drawTelluric, hatch } from './draw-bands';
import { strokeCurve, strokePixels } from './draw-steps';
import type { DrawnPixels } from './draw-spectrum';
import type { PlotStyle } from './plot-style';

/** Where the rungs of the velocity ladder stand, CSS pixels. */
export interface LadderFrame {
  width: number;
  height: number;
  left: number;
  plotWidth: number;
  top: number;
  rungHeight: number;
  halfRangeKms: number;
}

/** Velocity of an observed wavelength relative to where a line is expected, km/s (optical convention). */
export function velocityOf(wavelength: number, expected: number): number {
  return SPEED_OF_LIGHT_KMS * (wavelength / expected - 1);
}

/** The cut-outs of every line on one velocity axis: bands, flux less continuum, model less continuum. */
export function drawLadder(
  context: CanvasRenderingContext2D,
  frame: LadderFrame,
  style: PlotStyle,
  pixels: DrawnPixels,
  model: Float64Array,
  lines: readonly ExpectedLine[],
  bands: ObserverBands,
  masks: readonly Band[],
): void {
  const { left, plotWidth, top, rungHeight, halfRangeKms } = frame;
  const bottom = top + rungHeight * lines.length;
  const [first, last] = [pixels.edges.left[0], pixels.edges.right[pixels.wavelength.length - 1]];
  context.fillStyle = style.colour.well;
  context.fillRect(left, top, plotWidth, bottom - top);
  context.fillStyle = style.colour.grid;
  for (const share of [0.25, 0.75]) context.fillRect(left + share * plotWidth, top, 1, bottom - top);
  lines.forEach((line, rung) => {
    const area = { left, right: left + plotWidth, top: top + rung * rungHeight, bottom: top + (rung + 1) * rungHeight };
    const expected = line.wavelengthObserved;
    const toX = (wavelength: number) =>
      left + ((velocityOf(wavelength, expected) + halfRangeKms) / (2 * halfRangeKms)) * plotWidth;
    const reach = (1.03 * halfRangeKms) / SPEED_OF_LIGHT_KMS;
    const range = pixelRange(pixels.wavelength, expected * (1 - reach), expected * (1 + reach));
    const scale = rungScale(pixels, range, bands.skyLines);
    const toY = (flux: number) =>
      area.bottom - 3 - ((flux - scale.bottom) / (scale.top - scale.bottom)) * (rungHeight - 6);
    context.save();
    context.beginPath();
    context.rect(left, area.top, plotWidth, rungHeight);
    context.clip();
    drawSkyLines(context, style, area, bands, toX);
    drawTelluric(context, style, area, bands, toX, 5);
    // Beyond the ends of the spectrum there is nothing to see, and that is said by a hatch over the whole rung.
    const [start, end] = [toX(first), toX(last)];
    if (start > left) hatch(context, style.colour.telluric, left, area.top, start - left, rungHeight);
    if (end < area.right) hatch(context, style.colour.telluric, end, area.top, area.right - end, rungHeight);
    drawGaps(context, style, area, pixels.gaps, toX);
    for (const { from, to } of masks) {
      const [a, b] = [Math.max(left, toX(from)), Math.min(area.right, toX(to))];
      if (b > a) hatch(context, style.colour['rule-strong'], a, area.top, b - a, rungHeight);
    }
    context.strokeStyle = style.colour.flux;
    context.lineWidth = 1;
    const usable = (i: number) => pixels.error[i] > 0 && pixels.error[i] < Infinity;
    const residual = (i: number) => (usable(i) ? pixels.flux[i] - pixels.continuum[i] : NaN);
    strokePixels(context, range, pixels.edges, residual, toX, toY);
    context.strokeStyle = style.colour.model;
    context.lineWidth = style.width.model;
    context.setLineDash(style.dash.model);
    strokeCurve(
      context,
      range,
      (i) => toX(pixels.wavelength[i]),
      (i) => toY(model[i] - pixels.continuum[i]),
    );
    context.restore();
  });
}

import type { ObserverBands } from '../observer-bands';
import type { PlotStyle } from './plot-style';

interface Area {
  left: number;
  right: number;
  top: number;
  bottom: number;
}

/** Sky lines as flat bands over the whole height. */
export function drawSkyLines(
  context: CanvasRenderingContext2D,
  style: PlotStyle,
  area: Area,
  bands: ObserverBands,
  toX: (wavelength: number) => number,
): void {
  context.fillStyle = style.colour.skyline;
  for (const { from, to } of bands.skyLines) {
    const [left, right] = [Math.max(area.left, toX(from)), Math.min(area.right, toX(to))];
    if (right > left || (right >= area.left && left <= area.right)) {
      context.fillRect(left, area.top, Math.max(1.5, right - left), area.bottom - area.top);
    }
  }
}

/** Telluric bands as a hatch at the foot, and at the top where `topHeight` is more than 0. */
export function drawTelluric(
  context: CanvasRenderingContext2D,
  style: PlotStyle,
  area: Area,
  bands: ObserverBands,
  toX: (wavelength: number) => number,
  footHeight: number,
  topHeight = 0,
): void {
  for (const { from, to } of bands.telluric) {
    const [left, right] = [Math.max(area.left, toX(from)), Math.min(area.right, toX(to))];
    if (right <= left) continue;
    hatch(context, style.colour.telluric, left, area.bottom - footHeight, right - left, footHeight);
    if (topHeight > 0) hatch(context, style.colour.telluric, left, area.top, right - left, topHeight);
  }
}

/** What no pixel covers as a hatch over the whole height. */
export function drawGaps(
  context: CanvasRenderingContext2D,
  style: PlotStyle,
  area: Area,
  gaps: readonly { from: number; to: number }[],
  toX: (wavelength: number) => number,
): void {
  for (const { from, to } of gaps) {
    const [left, right] = [Math.max(area.left, toX(from)), Math.min(area.right, toX(to))];
    if (right - left > 1) hatch(context, style.colour.telluric, left, area.top, right - left, area.bottom - area.top);
  }
}

/** Fills a box with lines rising to the right, 5 px apart. */
export function hatch(
  context: CanvasRenderingContext2D,
  colour: string,
  left: number,
  top: number,
  width: number,
  height: number,
): void {
  context.save();
  context.beginPath();
  context.rect(left, top, width, height);
  context.clip();
  context.strokeStyle = colour;
  context.lineWidth = 0.8;
  context.beginPath();
  for (let x = left - height; x < left + width + height; x += 5) {
    context.moveTo(x, top + height);
    context.lineTo(x + height, top);
  }
  context.stroke();
  context.restore();
}

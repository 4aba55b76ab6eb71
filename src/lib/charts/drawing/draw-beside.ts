import { binColumns } from '../layout/bin-columns';
import { pixelEdges, pixelRange } from '../layout/pixel-edges';
import type { SpectrumScene } from './draw-spectrum';
import { strokeColumns, strokePixels } from './draw-steps';
import type { PlotStyle } from './plot-style';

/** Another spectrum in the same unit, drawn beside the one on the desk. */
export interface BesideCurve {
  label: string;
  /** Place in the list, which gives its look. */
  place: number;
  wavelength: Float64Array;
  flux: Float64Array;
  error: Float64Array;
}

const LOOKS = ['teal', 'violet', 'ochre'] as const;
const DASHES = [[], [6, 2], [2, 2]];

/** Colour token and dash of the nth spectrum beside: three colours that colour-blind eyes tell apart, then dashed. */
export function besideLook(place: number): { colour: keyof PlotStyle['colour']; dash: number[] } {
  // In the dome all colours are one red: there the dash changes first.
  return {
    colour: LOOKS[place % LOOKS.length],
    dash: DASHES[(place + Math.floor(place / LOOKS.length)) % DASHES.length],
  };
}

export function drawBeside(
  context: CanvasRenderingContext2D,
  scene: SpectrumScene,
  view: { from: number; to: number },
  curves: readonly BesideCurve[],
): void {
  const { frame, style, toX, toY } = scene;
  context.save();
  context.beginPath();
  context.rect(frame.left, frame.fluxTop, frame.plotWidth, frame.fluxBottom - frame.fluxTop);
  context.clip();
  for (const curve of curves) {
    const { colour, dash } = besideLook(curve.place);
    context.strokeStyle = style.colour[colour];
    context.lineWidth = 1.25;
    context.setLineDash(dash);
    const range = pixelRange(curve.wavelength, view.from, view.to);
    const count = Math.round(frame.plotWidth);
    if (range[1] - range[0] > 1.3 * count) {
      strokeColumns(context, frame.left, binColumns(curve, view.from, view.to, count).mean, toY, true);
    } else {
      const value = (i: number) => (curve.error[i] > 0 ? curve.flux[i] : NaN);
      strokePixels(context, range, pixelEdges(curve.wavelength), value, toX, toY);
    }
  }
  context.restore();
}

/** Where the parts of the spectrum plot stand, CSS pixels. The level diagram under it takes left and plotWidth too. */
export interface SpectrumFrame {
  width: number;
  height: number;
  /** Narrow pages: fewer ticks, shorter titles. */
  small: boolean;
  left: number;
  plotWidth: number;
  fluxTop: number;
  fluxBottom: number;
  /** Panel of residuals between flux and sky; both ends equal where it is not shown. */
  residualTop: number;
  residualBottom: number;
  /** Equal where there is no sky panel. */
  skyTop: number;
  skyBottom: number;
}

/** The axis of the residuals ends at this many errors. */
export const RESIDUAL_SIGMAS = 5;
const LABEL_ROW = 92;
const AXIS_ROW = 36;
const SKY_PANEL = 34;
const RESIDUAL_PANEL = 46;
/** Room above the residuals for what they are. */
const RESIDUAL_TITLE = 17;
const RIGHT = 8;

/** Left edge and width shared by everything that stands on the wavelength axis. */
export function wavelengthFrame(width: number): { small: boolean; left: number; plotWidth: number } {
  const small = width < 500;
  const left = small ? 40 : 52;
  return { small, left, plotWidth: Math.max(1, width - left - RIGHT) };
}

export function spectrumFrame(width: number, height: number, hasSky: boolean, residuals = false): SpectrumFrame {
  const skyBottom = height - AXIS_ROW;
  const skyTop = hasSky ? skyBottom - SKY_PANEL : skyBottom;
  const residualBottom = hasSky ? skyTop - 4 : skyBottom;
  const residualTop = residuals ? residualBottom - RESIDUAL_PANEL : residualBottom;
  const fluxBottom = Math.max(LABEL_ROW + 1, residuals ? residualTop - RESIDUAL_TITLE : residualTop);
  const panels = { fluxTop: LABEL_ROW, fluxBottom, residualTop, residualBottom, skyTop, skyBottom };
  return { width, height, ...wavelengthFrame(width), ...panels };
}

/** Keeps a stretch of wavelength inside [low, high] and at least `least` wide. */
export function clampView(
  from: number,
  to: number,
  low: number,
  high: number,
  least = 40,
): { from: number; to: number } {
  const width = Math.min(high - low, Math.max(least, to - from));
  const start = Math.max(low, Math.min(high - width, (from + to) / 2 - width / 2));
  return { from: start, to: start + width };
}

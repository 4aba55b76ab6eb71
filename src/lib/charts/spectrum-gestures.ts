import type { SpectrumGeometry } from './spectrum-geometry.svelte';

interface Options {
  geometry: SpectrumGeometry;
  redshift: () => number;
  view: () => { from: number; to: number };
  wavelengthOf: (line: string) => number | null;
  onredshift: (redshift: number) => void;
  onview: (from: number, to: number) => void;
  onchoose: (line: string) => void;
  onhover: (x: number | null) => void;
  ondragging: (on: boolean) => void;
  /** Whether a drag brushes a stretch of wavelength instead of moving the redshift. */
  brush: () => boolean;
  onbrushing: (stretch: { from: number; to: number } | null) => void;
  onbrush: (from: number, to: number) => void;
}

/** Movement in CSS pixels below which a press is a click, not a drag. */
const CLICK_PIXELS = 3;
const ZOOM_STEP = 1.25;
/** Redshift step of one notch of the wheel, as a velocity over the speed of light: 30 km/s. */
const WHEEL_STEP = 30 / 299_792.458;

/**
 * What the pointer does in a spectrum plot: drag moves the redshift so that what was under the pointer stays under it;
 * Shift and drag pans; a click on a label chooses its line; Shift and wheel zooms about the pointer; the wheel alone moves
 * the redshift once the plot has the focus, so that a page that scrolls still scrolls. With the brush a drag marks a
 * stretch instead, and Escape lets it go. Each has a key and a field too.
 */
export function spectrumGestures(options: Options) {
  return (plot: HTMLElement) => {
    let start: Start | null = null;
    const xOf = (event: MouseEvent) => event.clientX - plot.getBoundingClientRect().left;

    function down(event: PointerEvent) {
      if (event.button !== 0) return;
      const x = xOf(event);
      const line = (event.target as Element).closest<SVGElement>('[data-line]')?.dataset.line ?? null;
      const anchor = (line && options.wavelengthOf(line)) || options.geometry.toWavelength(x);
      start = {
        x,
        line,
        anchor,
        redshift: options.redshift(),
        view: { ...options.view() },
        pan: event.shiftKey,
        brush: options.brush() && !event.shiftKey && !line,
        moved: false,
      };
      plot.setPointerCapture(event.pointerId);
    }

    function move(event: PointerEvent) {
      const x = xOf(event);
      if (!start) return options.onhover(event.pointerType === 'touch' ? null : x);
      const distance = x - start.x;
      if (!start.moved && Math.abs(distance) < CLICK_PIXELS) return;
      if (!start.moved) options.ondragging(!start.pan && !start.brush);
      start.moved = true;
      if (start.brush) return options.onbrushing(stretchTo(start, x));
      const angstrom = (distance / options.geometry.frame.plotWidth) * (start.view.to - start.view.from);
      if (start.pan) options.onview(start.view.from - angstrom, start.view.to - angstrom);
      else options.onredshift((1 + start.redshift) * (1 + angstrom / start.anchor) - 1);
    }

    function up(event: PointerEvent) {
      if (start && !start.moved && start.line && event.type === 'pointerup') options.onchoose(start.line);
      if (start?.brush && start.moved && event.type === 'pointerup') {
        const { from, to } = stretchTo(start, xOf(event));
        options.onbrush(from, to);
      }
      options.onbrushing(null);
      start = null;
      options.ondragging(false);
    }

    /** The stretch from where the press began, inside the frame. */
    function stretchTo({ x: from }: Start, to: number): { from: number; to: number } {
      const { left, plotWidth } = options.geometry.frame;
      const inside = (at: number) => options.geometry.toWavelength(Math.min(left + plotWidth, Math.max(left, at)));
      return { from: inside(Math.min(from, to)), to: inside(Math.max(from, to)) };
    }

    function escape(event: KeyboardEvent) {
      if (event.key !== 'Escape' || !start?.brush) return;
      start = null;
      options.onbrushing(null);
    }

    function wheel(event: WheelEvent) {
      // Some systems turn Shift and wheel into a sideways wheel.
      const turn = event.deltaY || event.deltaX;
      if (event.ctrlKey || event.metaKey || event.altKey || turn === 0) return;
      if (!event.shiftKey && document.activeElement !== plot) return;
      event.preventDefault();
      if (!event.shiftKey) return options.onredshift((1 + options.redshift()) * (1 - Math.sign(turn) * WHEEL_STEP) - 1);
      const [middle, { from, to }] = [options.geometry.toWavelength(xOf(event)), options.view()];
      const factor = turn > 0 ? ZOOM_STEP : 1 / ZOOM_STEP;
      options.onview(middle - (middle - from) * factor, middle + (to - middle) * factor);
    }

    const leave = () => options.onhover(null);
    const listeners = [
      ['pointerdown', down],
      ['pointermove', move],
      ['pointerup', up],
      ['pointercancel', up],
      ['pointerleave', leave],
    ] as const;
    for (const [type, listener] of listeners) plot.addEventListener(type, listener as EventListener);
    plot.addEventListener('wheel', wheel, { passive: false });
    document.addEventListener('keydown', escape);
    return () => {
      for (const [type, listener] of listeners) plot.removeEventListener(type, listener as EventListener);
      plot.removeEventListener('wheel', wheel);
      document.removeEventListener('keydown', escape);
    };
  };
}

interface Start {
  x: number;
  line: string | null;
  /** Wavelength that stays under the pointer. */
  anchor: number;
  redshift: number;
  view: { from: number; to: number };
  pan: boolean;
  brush: boolean;
  moved: boolean;
}

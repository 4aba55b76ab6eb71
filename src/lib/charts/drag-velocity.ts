import { SPEED_OF_LIGHT_KMS } from '$lib/science/constants/physical';

interface Options {
  redshift: () => number;
  kmsPerPixel: () => number;
  /** Presses left of this, CSS pixels, are on the names and never drag. */
  from: () => number;
  onredshift: (redshift: number) => void;
}

/** Dragging a cut-out sideways moves the redshift so that the peak follows the pointer. */
export function dragVelocity(options: Options) {
  return (plot: HTMLElement) => {
    let start: { x: number; redshift: number; moved: boolean } | null = null;
    const xOf = (event: PointerEvent) => event.clientX - plot.getBoundingClientRect().left;
    function down(event: PointerEvent) {
      const x = xOf(event);
      if (event.button !== 0 || x < options.from()) return;
      start = { x, redshift: options.redshift(), moved: false };
      plot.setPointerCapture(event.pointerId);
    }
    function move(event: PointerEvent) {
      if (!start) return;
      const distance = xOf(event) - start.x;
      if (Math.abs(distance) < 2 && !start.moved) return;
      start.moved = true;
      // To the right means towards larger velocity in the cut-out, which a smaller redshift gives.
      const shift = (distance * options.kmsPerPixel()) / SPEED_OF_LIGHT_KMS;
      options.onredshift((1 + start.redshift) * (1 - shift) - 1);
    }
    const up = () => (start = null);
    plot.addEventListener('pointerdown', down);
    plot.addEventListener('pointermove', move);
    plot.addEventListener('pointerup', up);
    plot.addEventListener('pointercancel', up);
    return () => {
      plot.removeEventListener('pointerdown', down);
      plot.removeEventListener('pointermove', move);
      plot.removeEventListener('pointerup', up);
      plot.removeEventListener('pointercancel', up);
    };
  };
}

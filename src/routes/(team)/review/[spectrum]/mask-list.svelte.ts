import type { Mask, MaskReason } from '$lib/domain/mask';
import { MOST_MASKS } from '$lib/domain/mask';

/**
 * Adds a stretch to masks in order of wavelength; those of the same reason that it touches become one with it.
 * Ends may come in either order; a stretch without width changes nothing.
 */
export function withMask(masks: readonly Mask[], from: number, to: number, reason: MaskReason): Mask[] {
  if (!Number.isFinite(from) || !Number.isFinite(to) || from === to) return [...masks];
  let one: Mask = { from: Math.min(from, to), to: Math.max(from, to), reason };
  const apart: Mask[] = [];
  for (const mask of masks) {
    if (mask.reason !== reason || mask.to < one.from || mask.from > one.to) apart.push(mask);
    else one = { from: Math.min(mask.from, one.from), to: Math.max(mask.to, one.to), reason };
  }
  return [...apart, one].sort((a, b) => a.from - b.from).slice(0, MOST_MASKS);
}

/** The stretches of one spectrum that a person leaves out of the fit; every change can be taken back. */
export class MaskList {
  masks = $state.raw<readonly Mask[]>([]);
  /** Whether dragging in the spectrum masks instead of moving the redshift. */
  brush = $state(false);
  /** What the next stretch is left out for. */
  reason = $state<MaskReason>('sky residual');
  #before = $state.raw<readonly (readonly Mask[])[]>([]);
  canUndo = $derived(this.#before.length > 0);
  /** As a form sends them. */
  text = $derived(JSON.stringify(this.masks));

  #onchange: () => void;

  /** @param onchange called after every change: what was fitted before holds no more */
  constructor(masks: readonly Mask[] = [], onchange: () => void = () => {}) {
    this.masks = masks;
    this.#onchange = onchange;
  }

  add(from: number, to: number, reason: MaskReason = this.reason): void {
    this.#change(withMask(this.masks, from, to, reason));
  }

  remove(mask: Mask): void {
    this.#change(this.masks.filter((other) => other !== mask));
  }

  /** Takes the last change back. */
  undo(): boolean {
    const before = this.#before.at(-1);
    if (!before) return false;
    this.#before = this.#before.slice(0, -1);
    this.masks = before;
    this.#onchange();
    return true;
  }

  #change(masks: readonly Mask[]): void {
    this.#before = [...this.#before, this.masks];
    this.masks = masks;
    this.#onchange();
  }
}

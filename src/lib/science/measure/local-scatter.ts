import { medianInPlace } from './order-statistics';

const BLOCK = 96;

/**
 * Slowly varying median of a per-pixel quantity: medians of blocks of 96 pixels joined linearly.
 *
 * @param values one value a pixel; pixels with values not above 0 are left out
 * @returns one value a pixel; 0 where no block has a value
 */
export function runningMedian(values: Float64Array): Float64Array {
  const count = values.length;
  const blocks = Math.max(1, Math.round(count / BLOCK));
  const medians = new Float64Array(blocks);
  const scratch = new Float64Array(Math.ceil(count / blocks) + 1);
  for (let b = 0; b < blocks; b++) {
    const from = Math.floor((b * count) / blocks);
    const to = Math.floor(((b + 1) * count) / blocks);
    let used = 0;
    for (let i = from; i < to; i++) if (values[i] > 0) scratch[used++] = values[i];
    medians[b] = used > 0 ? medianInPlace(scratch, used) : NaN;
  }
  for (let b = 1; b < blocks; b++) if (Number.isNaN(medians[b])) medians[b] = medians[b - 1];
  for (let b = blocks - 2; b >= 0; b--) if (Number.isNaN(medians[b])) medians[b] = medians[b + 1];
  const running = new Float64Array(count);
  for (let i = 0; i < count; i++) {
    const position = ((i + 0.5) * blocks) / count - 0.5;
    const k = Math.max(0, Math.min(blocks - 2, Math.floor(position)));
    const a = medians[k];
    const b = blocks > 1 ? medians[k + 1] : a;
    const t = Math.max(0, Math.min(1, position - k));
    running[i] = Number.isNaN(a) ? 0 : a + (b - a) * t;
  }
  return running;
}

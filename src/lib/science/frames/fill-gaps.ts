import { findGaps } from './pixel-edges';

/** Pixels that may be put into one gap; a longer gap gets fewer and wider ones. */
const MAX_FILLED = 2000;

/**
 * Where pixels must be put so that a spectrum with gaps (detector gaps, pixels left out of a table) runs on an unbroken
 * grid again: kernels counted in pixels stay honest, and no pixel's edges reach into a gap. Longer gaps than 2000
 * pixels are filled by 2000 wider ones; all together never more than the spectrum has pixels of its own.
 *
 * @param wavelength pixel centres, strictly increasing
 * @returns `wavelength` with the fillers in place and `source`, the index of each pixel in the input or -1 for a filler.
 */
export function fillGaps(wavelength: Float64Array): { wavelength: Float64Array; source: Int32Array } {
  const n = wavelength.length;
  const gaps = findGaps(wavelength);
  const fillers = new Int32Array(gaps.length);
  let wanted = 0;
  gaps.forEach((usual, i) => {
    if (usual === 0) return;
    fillers[i] = Math.min(MAX_FILLED, Math.max(1, Math.round((wavelength[i + 1] - wavelength[i]) / usual) - 1));
    wanted += fillers[i];
  });
  if (wanted === 0) return { wavelength, source: Int32Array.from({ length: n }, (_, i) => i) };
  const share = Math.min(1, n / wanted);
  const filled: number[] = [];
  const source: number[] = [];
  for (let i = 0; i < n; i++) {
    filled.push(wavelength[i]);
    source.push(i);
    if (!fillers[i]) continue;
    const count = Math.max(1, Math.floor(fillers[i] * share));
    const step = (wavelength[i + 1] - wavelength[i]) / (count + 1);
    for (let k = 1; k <= count; k++) {
      filled.push(wavelength[i] + k * step);
      source.push(-1);
    }
  }
  return { wavelength: Float64Array.from(filled), source: Int32Array.from(source) };
}

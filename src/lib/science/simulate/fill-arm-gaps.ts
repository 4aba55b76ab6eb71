import type { DetectorGrid } from './detector-grid';

/** Most pixels put into one gap. */
const MOST_FILLERS = 2000;

/** The pixels of all arms as one unbroken run, as the engine wants it. */
export interface UnbrokenPixels {
  wavelength: Float64Array;
  edges: Float64Array;
  /** Index of each pixel in the grid, -1 for a filler. */
  source: Int32Array;
}

/** Puts unusable pixels of about the usual size between the arms, so that edges are shared everywhere. */
export function fillArmGaps(grid: DetectorGrid): UnbrokenPixels {
  const wavelength: number[] = [];
  const edges: number[] = grid.centre.length ? [grid.lower[0]] : [];
  const source: number[] = [];
  for (let i = 0; i < grid.centre.length; i++) {
    if (i > 0 && grid.arm[i] !== grid.arm[i - 1]) {
      const from = grid.upper[i - 1];
      const gap = grid.lower[i] - from;
      const count = Math.min(MOST_FILLERS, Math.max(1, Math.round(gap / (grid.upper[i] - grid.lower[i]))));
      for (let k = 0; k < count; k++) {
        wavelength.push(from + (gap * (k + 0.5)) / count);
        edges.push(from + (gap * (k + 1)) / count);
        source.push(-1);
      }
    }
    wavelength.push(grid.centre[i]);
    edges.push(grid.upper[i]);
    source.push(i);
  }
  return {
    wavelength: Float64Array.from(wavelength),
    edges: Float64Array.from(edges),
    source: Int32Array.from(source),
  };
}

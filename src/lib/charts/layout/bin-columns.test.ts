import { describe, expect, it } from 'vitest';
import { binColumns, binCurve } from './bin-columns';

const array = (...values: number[]) => Float64Array.from(values);

describe('binColumns', () => {
  const pixels = { wavelength: array(0.5, 1.5, 2.5, 3.5), flux: array(1, 3, 10, 7), error: array(1, 2, NaN, 1) };
  it('takes the inverse-variance mean and the range of usable pixels', () => {
    const columns = binColumns(pixels, 0, 4, 2);
    expect([...columns.mean]).toEqual([(1 + 3 / 4) / 1.25, 7]);
    expect([columns.low[0], columns.high[0], columns.error[0]]).toEqual([1, 3, 1.5]);
    expect([...columns.start]).toEqual([0, 2, 4]);
  });
  it('leaves a gap where nothing is usable', () => {
    const columns = binColumns(pixels, 2, 3, 1);
    expect([columns.mean[0], columns.low[0]]).toEqual([NaN, NaN]);
    expect(binColumns({ wavelength: array(), flux: array(), error: array() }, 0, 1, 3).mean.every(Number.isNaN)).toBe(
      true,
    );
  });
  it('weighs another curve alike', () => {
    const columns = binColumns(pixels, 0, 4, 4);
    expect([...binCurve(array(1, 2, 3, 4), pixels.error, columns)]).toEqual([1, 2, 3, 4]);
    const wide = binColumns(pixels, 0, 4, 2);
    expect(binCurve(pixels.flux, pixels.error, wide)[0]).toBeCloseTo(wide.mean[0], 12);
  });
});

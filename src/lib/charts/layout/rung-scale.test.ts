import { describe, expect, it } from 'vitest';
import { rungScale } from './rung-scale';

describe('rungScale', () => {
  const count = 60;
  const array = (value: (i: number) => number) => Float64Array.from({ length: count }, (_, i) => value(i));
  const spectrum = {
    wavelength: array((i) => i),
    flux: array((i) => (i === 30 || i === 31 || i === 32 ? 13 : 1)),
    error: array(() => 1),
    continuum: array(() => 1),
  };
  it('makes room for the peak of the line', () => {
    expect(rungScale(spectrum, [0, count], []).top).toBeCloseTo(12 * 1.2, 10);
  });
  it('leaves out what stands under a sky line', () => {
    expect(rungScale(spectrum, [0, count], [{ from: 28, to: 34 }]).top).toBe(3);
  });
  it('is -1 to 1 where no pixel is usable', () => {
    expect(rungScale({ ...spectrum, error: array(() => NaN) }, [0, count], [])).toEqual({ bottom: -1, top: 1 });
  });
});

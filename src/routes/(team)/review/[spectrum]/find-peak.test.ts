import { describe, expect, it } from 'vitest';
import { findPeak } from './find-peak';

const count = 100;
const array = (value: (i: number) => number) => Float64Array.from({ length: count }, (_, i) => value(i));
const spectrum = {
  wavelength: array((i) => 5000 + i),
  flux: array((i) => (Math.abs(i - 40) < 2 ? 9 : i === 45 ? 20 : 1)),
  error: array(() => 1),
  continuum: array(() => 1),
};

describe('findPeak', () => {
  it('finds the highest three-pixel mean near the pointer, not the tallest single pixel', () => {
    expect(findPeak(spectrum, 5043)).toBe(5040);
  });
  it('does not look further than 14 ångström', () => {
    expect(findPeak(spectrum, 5080)).not.toBe(5040);
  });
  it('finds nothing where no pixel is usable or none is there', () => {
    expect(findPeak({ ...spectrum, error: array(() => NaN) }, 5040)).toBeNull();
    expect(findPeak(spectrum, 9000)).toBeNull();
  });
});

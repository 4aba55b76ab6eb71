import { describe, expect, it } from 'vitest';
import { isInBand, observerBands } from './observer-bands';

const wavelength = Float64Array.from({ length: 2000 }, (_, i) => 6000 + i);
const flat = new Float64Array(2000).fill(1);
const skyWith = (place: number) =>
  flat.map((value, i) => value + 50 * Math.exp(-0.5 * ((6000 + i - place) / 1.5) ** 2));

describe('observerBands', () => {
  it("takes listed lines and bands from the observatory's frame to the spectrum's", () => {
    const bands = observerBands({ wavelength, error: flat, sky: null, observerFactor: 1.0001 });
    expect(isInBand(bands.skyLines, 6302.046 / 1.0001)).toBe(true);
    expect(isInBand(bands.skyLines, 6310)).toBe(false);
    expect(bands.telluric.map(({ molecule }) => molecule)).toEqual(['O2', 'H2O', 'O2']);
    expect(bands.telluric[0].from).toBeCloseTo(6864 / 1.0001, 6);
  });
  it('finds lines in the sky spectrum, in the spectrum where they stand', () => {
    const bands = observerBands({ wavelength, error: flat, sky: skyWith(7100), observerFactor: 1 });
    expect(isInBand(bands.skyLines, 7100)).toBe(true);
    expect(isInBand(bands.skyLines, 7120)).toBe(false);
  });
  it('finds them in the error where there is no sky spectrum', () => {
    const bands = observerBands({ wavelength, error: skyWith(6500), sky: null, observerFactor: 1 });
    expect(isInBand(bands.skyLines, 6500)).toBe(true);
  });
  it('joins what overlaps', () => {
    const { skyLines } = observerBands({ wavelength, error: flat, sky: skyWith(6302), observerFactor: 1 });
    expect(skyLines.filter(({ from, to }) => from < 6302 && to > 6302)).toHaveLength(1);
  });
  it('finds nothing in a spectrum without pixels', () => {
    const none = new Float64Array(0);
    expect(observerBands({ wavelength: none, error: none, sky: null, observerFactor: 1 })).toEqual({
      skyLines: [],
      telluric: [],
    });
  });
});

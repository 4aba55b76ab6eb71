import { describe, expect, it } from 'vitest';
import { nearestPixel, pixelEdges, pixelGaps, pixelRange } from './pixel-edges';

const array = (...values: number[]) => Float64Array.from(values);

describe('pixelEdges', () => {
  it('meets halfway between even pixels and leaves a detector gap empty', () => {
    const { left, right } = pixelEdges(array(1, 2, 3, 10, 11));
    expect(right[0]).toBeCloseTo(1.5, 10);
    expect(left[1]).toBeCloseTo(1.5, 10);
    expect(right[2]).toBeCloseTo(3.505, 10);
    expect(left[3]).toBeCloseTo(9.495, 10);
  });
  it('names what no usable pixel covers, and nothing on a smoothly growing step or for a single bad pixel', () => {
    const gapsOf = (wavelength: Float64Array, bad: number[] = []) =>
      pixelGaps(
        pixelEdges(wavelength),
        wavelength.map((_, i) => (bad.includes(i) ? NaN : 1)),
      );
    const [gap, ...others] = gapsOf(array(1, 2, 3, 10, 11));
    expect([gap.from, gap.to, others]).toEqual([expect.closeTo(3.505, 9), expect.closeTo(9.495, 9), []]);
    expect(gapsOf(Float64Array.from({ length: 500 }, (_, i) => 4000 * 1.002 ** i))).toEqual([]);
    const even = Float64Array.from({ length: 20 }, (_, i) => i);
    expect(gapsOf(even, [5, 16, 17])).toEqual([]);
    const [first, second] = gapsOf(even, [0, 1, 2, 3, 10, 11, 12, 13, 14]);
    expect([first.from, first.to]).toEqual([expect.closeTo(-0.505, 9), expect.closeTo(3.5, 9)]);
    expect([second.from, second.to]).toEqual([expect.closeTo(9.5, 9), expect.closeTo(14.5, 9)]);
    expect(gapsOf(array())).toEqual([]);
  });
  it('finds pixels by bisection', () => {
    const wavelength = array(1, 2, 3, 4);
    expect([pixelRange(wavelength, 2, 3), pixelRange(wavelength, 5, 6)]).toEqual([
      [1, 3],
      [4, 4],
    ]);
    expect([0, 2.4, 2.6, 9].map((place) => nearestPixel(wavelength, place))).toEqual([0, 1, 2, 3]);
    expect(nearestPixel(array(), 1)).toBe(-1);
  });
});

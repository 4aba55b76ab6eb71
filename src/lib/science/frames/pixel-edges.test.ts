import { describe, expect, it } from 'vitest';
import { fillGaps } from './fill-gaps';
import { findGaps, pixelEdges } from './pixel-edges';

const grid = (from: number, step: number, count: number) => Array.from({ length: count }, (_, i) => from + step * i);

describe('pixelEdges', () => {
  it('puts edges half-way between centres and half a step beyond the ends', () => {
    expect(Array.from(pixelEdges(Float64Array.of(10, 12, 16)))).toEqual([9, 11, 14, 18]);
  });

  it('gives one pixel a width and no pixel no edge', () => {
    expect(Array.from(pixelEdges(Float64Array.of(5)))).toEqual([4.5, 5.5]);
    expect(pixelEdges(new Float64Array(0))).toHaveLength(0);
  });
});

describe('findGaps', () => {
  it('takes a change of dispersion for no gap', () => {
    const arms = Float64Array.from([...grid(4000, 0.6, 50), ...grid(4030, 1.2, 50)]);
    expect(findGaps(arms).every((gap) => gap === 0)).toBe(true);
  });

  it('finds a gap between arms of unequal dispersion', () => {
    const arms = Float64Array.from([...grid(4000, 0.6, 50), ...grid(4100, 1.2, 50)]);
    const gaps = findGaps(arms);
    expect(gaps[49]).toBeGreaterThan(0);
    expect(gaps.filter((gap) => gap > 0)).toHaveLength(1);
  });

  it('takes a logarithmic grid for unbroken', () => {
    const log = Float64Array.from({ length: 4000 }, (_, i) => 3600 * 10 ** (1e-4 * i));
    expect(findGaps(log).every((gap) => gap === 0)).toBe(true);
  });
});

describe('fillGaps', () => {
  it('gives left-out pixels their places back', () => {
    const all = grid(5000, 2, 100);
    const kept = all.filter((_, i) => i !== 40 && !(i >= 60 && i < 65));
    const { wavelength, source } = fillGaps(Float64Array.from(kept));
    expect(wavelength).toHaveLength(100);
    wavelength.forEach((value, i) => expect(value).toBeCloseTo(all[i], 9));
    expect(source[40]).toBe(-1);
    expect(Array.from(source.slice(60, 65))).toEqual([-1, -1, -1, -1, -1]);
    expect(source[99]).toBe(kept.length - 1);
  });

  it('keeps every pixel its own width beside a gap', () => {
    const { wavelength } = fillGaps(Float64Array.from([...grid(4000, 1, 30), ...grid(4500, 1, 30)]));
    const edges = pixelEdges(wavelength);
    const at = wavelength.indexOf(4029);
    expect(edges[at + 1] - edges[at]).toBeLessThan(10);
  });

  it('never puts in more pixels than there are', () => {
    const far = Float64Array.from([...grid(4000, 0.001, 20), ...grid(20000, 0.001, 20)]);
    expect(fillGaps(far).wavelength.length).toBeLessThanOrEqual(80);
  });
});

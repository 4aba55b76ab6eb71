import { describe, expect, it } from 'vitest';
import { axisExponent, axisTicks, roundBelow } from './axis-ticks';
import { binColumns, binCurve } from './bin-columns';
import { fluxScale } from './flux-scale';
import { lineLabel, lineLabelsIn } from './line-name';
import { nearestPixel, pixelEdges, pixelRange } from './pixel-edges';
import { smoothInverseVariance } from './smooth';
import { chooseLabels, spreadLabels } from './spread-labels';

const array = (...values: number[]) => Float64Array.from(values);

describe('axisTicks', () => {
  it('steps by 1, 2 or 5 times a power of ten inside the range', () => {
    expect(axisTicks(3700, 9300, 9)).toEqual({
      values: [4000, 4500, 5000, 5500, 6000, 6500, 7000, 7500, 8000, 8500, 9000],
      step: 500,
      decimals: 0,
    });
    for (const [from, to] of [
      [-0.3, 4.1],
      [6471, 6893],
      [0, 1e-17],
      [-2, 31],
    ]) {
      const { values, step } = axisTicks(from, to, 5);
      expect([1, 2, 5]).toContainEqual(Math.round(step / 10 ** Math.floor(Math.log10(step) + 1e-9)));
      expect(values.every((value) => value >= from && value <= to)).toBe(true);
    }
  });
  it('counts the decimals that tell ticks apart', () => {
    expect([axisTicks(0, 1, 10).decimals, axisTicks(0, 0.1, 5).decimals, axisTicks(0, 40, 5).decimals]).toEqual([
      1, 2, 0,
    ]);
  });
  it('has none for an empty range', () => {
    expect(axisTicks(2, 2, 5).values).toEqual([]);
  });
});

describe('axisExponent and roundBelow', () => {
  it('takes a power of ten out only where labels would be long', () => {
    expect([3.4, 0.02, 99_999, 4.2e-17, 3e6, 0, NaN].map(axisExponent)).toEqual([0, 0, 0, -17, 6, 0, 0]);
  });
  it('rounds down to 1, 2 or 5', () => {
    expect([130, 99, 21, 5, 0.7].map(roundBelow)).toEqual([100, 50, 20, 5, 0.5]);
    expect(roundBelow(0)).toBeNaN();
  });
});

describe('spreadLabels', () => {
  it('leaves alone what is already apart', () => {
    expect(spreadLabels([10, 40, 80], 15, 0, 100)).toEqual([10, 40, 80]);
  });
  it('spreads a crowd about its own middle', () => {
    expect(spreadLabels([50, 50, 50], 15, 0, 100)).toEqual([35, 50, 65]);
  });
  it('keeps order, gap and ends', () => {
    const places = spreadLabels([1, 2, 3, 60, 61, 99, 100], 15, 8, 130);
    places.forEach((place, i) => i > 0 && expect(place - places[i - 1]).toBeGreaterThanOrEqual(15 - 1e-9));
    expect(places[0]).toBeGreaterThanOrEqual(8);
    expect(places[6]).toBeLessThanOrEqual(130);
  });
  it('gives nothing for nothing', () => {
    expect(spreadLabels([], 15, 0, 100)).toEqual([]);
  });
});

describe('chooseLabels', () => {
  it('keeps the weightiest in their own order', () => {
    expect(chooseLabels([1, 9, 3, 7], 2)).toEqual([1, 3]);
    expect(chooseLabels([1, 9], 5)).toEqual([0, 1]);
    expect(chooseLabels([1], 0)).toEqual([]);
  });
});

describe('pixelEdges', () => {
  it('meets halfway between even pixels and leaves a detector gap empty', () => {
    const { left, right } = pixelEdges(array(1, 2, 3, 10, 11));
    expect(right[0]).toBeCloseTo(1.5, 10);
    expect(left[1]).toBeCloseTo(1.5, 10);
    expect(right[2]).toBeCloseTo(3.505, 10);
    expect(left[3]).toBeCloseTo(9.495, 10);
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

describe('smoothInverseVariance', () => {
  it('leaves a constant constant and gives noisy pixels little say', () => {
    const flux = array(2, 2, 2, 50, 2, 2);
    const smooth = smoothInverseVariance(flux, array(1, 1, 1, 1e6, 1, 1), 1);
    smooth.forEach((value) => expect(value).toBeCloseTo(2, 6));
  });
  it('neither uses nor changes unusable pixels', () => {
    const smooth = smoothInverseVariance(array(1, 99, 1), array(1, NaN, 1), 1);
    expect([...smooth]).toEqual([1, 99, 1]);
  });
});

describe('fluxScale', () => {
  it('ignores a spike under a sky line but not one in the clear', () => {
    const values = new Float64Array(200).fill(1);
    values[50] = 40;
    const under = fluxScale(values, (i) => i !== 50);
    const clear = fluxScale(values, () => true);
    expect(under.top).toBeLessThan(2);
    expect(clear.top).toBeGreaterThan(40);
  });
  it('keeps zero in sight, below and above', () => {
    expect(fluxScale(new Float64Array(50).fill(7), () => true).bottom).toBeLessThan(0);
    expect(fluxScale(new Float64Array(50).fill(-7), () => true).top).toBeGreaterThan(0);
  });
  it('is 0 to 1 without data', () => {
    expect(fluxScale(array(NaN), () => true)).toEqual({ bottom: 0, top: 1 });
  });
});

describe('lineLabel', () => {
  it('writes hydrogen in Greek and keeps the name in one piece', () => {
    expect(['H-alpha 6565', 'Lyman-beta', '[O III] 5008', 'H-11 3772'].map(lineLabel)).toEqual([
      'Hα\u00a06565',
      'Lyβ',
      '[O\u00a0III]\u00a05008',
      'H11\u00a03772',
    ]);
  });
  it('finds names in a sentence', () => {
    expect(lineLabelsIn('H-beta and [O III] 5008 stand in one column, S/N 7.5')).toBe(
      'Hβ and [O\u00a0III]\u00a05008 stand in one column, S/N 7.5',
    );
  });
});

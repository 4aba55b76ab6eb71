import { describe, expect, it } from 'vitest';
import { chooseLabels, spreadLabels } from './spread-labels';

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

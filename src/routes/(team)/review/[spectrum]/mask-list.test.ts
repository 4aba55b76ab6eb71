import { describe, expect, it } from 'vitest';
import { MaskList, withMask } from './mask-list.svelte';

describe('withMask', () => {
  it('puts ends in order and joins what it touches for the same reason', () => {
    const one = withMask([], 5585, 5570, 'sky residual');
    expect(withMask(one, 5580, 5590, 'sky residual')).toEqual([{ from: 5570, to: 5590, reason: 'sky residual' }]);
  });
  it('keeps stretches of another reason apart and everything in order', () => {
    const masks = withMask([{ from: 5570, to: 5585, reason: 'sky residual' }], 5500, 5575, 'cosmic ray');
    expect(masks.map(({ from, reason }) => [from, reason])).toEqual([
      [5500, 'cosmic ray'],
      [5570, 'sky residual'],
    ]);
  });
  it('changes nothing for a stretch without width or without a number', () => {
    expect(withMask([], 5000, 5000, 'other')).toEqual([]);
    expect(withMask([], NaN, 5000, 'other')).toEqual([]);
  });
});

describe('MaskList', () => {
  it('takes back any number of changes, removals too', () => {
    const list = new MaskList();
    list.add(5000, 5010);
    list.add(6000, 6010, 'cosmic ray');
    list.remove(list.masks[0]);
    expect(list.masks).toHaveLength(1);
    expect([list.undo(), list.masks.length]).toEqual([true, 2]);
    expect([list.undo(), list.undo(), list.undo()]).toEqual([true, true, false]);
    expect(list.masks).toEqual([]);
    expect(list.canUndo).toBe(false);
  });
  it('starts from what was stored and sends it as JSON', () => {
    const list = new MaskList([{ from: 1, to: 2, reason: 'other' }]);
    expect(JSON.parse(list.text)).toEqual([{ from: 1, to: 2, reason: 'other' }]);
  });
});

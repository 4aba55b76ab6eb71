import { describe, expect, it } from 'vitest';
import { scrollToShow, windowRows } from './window-rows';

describe('windowRows', () => {
  it('draws a view and a little beyond of a long list, and keeps its full height', () => {
    const { first, end, above, below } = windowRows({ scrollTop: 50_000, height: 500 }, 25, 5000, 10);
    expect(first).toBeLessThanOrEqual(1990);
    expect(end).toBeGreaterThanOrEqual(2030);
    expect(end - first).toBeLessThan(50);
    expect(above + (end - first) * 25 + below).toBe(5000 * 25);
  });
  it('covers every visible row wherever the list is scrolled to', () => {
    for (let scrollTop = 0; scrollTop <= 5000 * 25 - 500; scrollTop += 333) {
      const { first, end } = windowRows({ scrollTop, height: 500 }, 25, 5000);
      expect(first * 25).toBeLessThanOrEqual(scrollTop);
      expect(end * 25).toBeGreaterThanOrEqual(scrollTop + 500);
    }
  });
  it('draws a short list whole, and nothing of an empty one', () => {
    expect(windowRows({ scrollTop: 0, height: 500 }, 25, 5)).toEqual({ first: 0, end: 5, above: 0, below: 0 });
    expect(windowRows({ scrollTop: 0, height: 500 }, 25, 0)).toEqual({ first: 0, end: 0, above: 0, below: 0 });
  });
  it('shows the last rows of a list that a filter made shorter than the scroll position', () => {
    const { first, end, below } = windowRows({ scrollTop: 90_000, height: 500 }, 25, 100, 10);
    expect([end, below]).toEqual([100, 0]);
    expect(first).toBeLessThanOrEqual(79);
  });
  it('draws everything before a row has been measured', () => {
    expect(windowRows({ scrollTop: 0, height: 500 }, 0, 40).end).toBe(40);
  });
});

describe('scrollToShow', () => {
  const view = { scrollTop: 1000, height: 500 };
  it('stays where the row is seen already', () => {
    expect(scrollToShow(45, view, 25, 40)).toBe(1000);
  });
  it('goes up to a row above, and down until a row below is whole', () => {
    expect(scrollToShow(10, view, 25, 40)).toBe(250);
    expect(scrollToShow(60, view, 25, 40)).toBe(61 * 25 - 460);
  });
});

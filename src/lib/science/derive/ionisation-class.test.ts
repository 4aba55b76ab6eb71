import { describe, expect, it } from 'vitest';
import { classifyPoint, ionisationClass } from './ionisation-class';

const line = (value: number, error = 1) => ({ value, error });

describe('classifyPoint', () => {
  it('tells the three regions apart', () => {
    expect(classifyPoint(-0.8, 0)).toBe('star-forming');
    expect(classifyPoint(-0.2, -0.2)).toBe('composite');
    expect(classifyPoint(0, 0.9)).toBe('active nucleus');
  });

  it('holds to the right of both curves, where their formulas turn over', () => {
    expect(classifyPoint(0.2, -1.3)).toBe('composite');
    expect(classifyPoint(0.6, -0.5)).toBe('active nucleus');
  });
});

describe('ionisationClass', () => {
  it('uses the limit of an unseen [N II] where that limit already decides', () => {
    const bright = { halpha: line(300), hbeta: line(100), oxygen: line(100) };
    expect(ionisationClass({ ...bright, nitrogen: line(0.5) })).toBe('star-forming');
  });

  it('is silent where the limit does not decide, or hydrogen is not seen', () => {
    expect(
      ionisationClass({ halpha: line(30, 10), hbeta: line(10, 3), oxygen: line(40), nitrogen: line(2, 10) }),
    ).toBeNull();
    expect(ionisationClass({ halpha: line(300), hbeta: line(1), oxygen: line(100), nitrogen: line(90) })).toBeNull();
    expect(ionisationClass({ halpha: line(300), hbeta: line(100), oxygen: null, nitrogen: line(90) })).toBeNull();
  });
});
